import * as reproduction from '$lib/server/revisions/reproduction';
import { forMember } from '$lib/server/web/guard';
import type { PageServerLoadEvent } from './$types';

export const load = forMember((actor, { params: { number, letter } }: PageServerLoadEvent) =>
	reproduction.ofRevision(actor, number, letter),
);
