import * as trail from '$lib/server/audit/trail';
import { forMember } from '$lib/server/web/guard';
import type { PageServerLoadEvent } from './$types';

export const load = forMember(async (actor, { url }: PageServerLoadEvent) => {
	const before = Number(url.searchParams.get('before'));
	return { events: await trail.list(actor, Number.isSafeInteger(before) ? before : 0) };
});
