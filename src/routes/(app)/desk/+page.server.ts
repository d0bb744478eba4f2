import * as desk from '$lib/server/desk/desk';
import { forMember } from '$lib/server/web/guard';
import type { PageServerLoadEvent } from './$types';

export const load = forMember(async (actor, _event: PageServerLoadEvent) => ({
	shelves: await desk.read(actor),
}));
