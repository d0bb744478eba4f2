import * as paper from '$lib/server/paper/paper';
import { forMember } from '$lib/server/web/guard';
import { paperOf, pdf } from '$lib/server/web/paper';
import type { RequestEvent } from './$types';

export const GET = forMember(async (actor, { params: { number, letter }, url }: RequestEvent) =>
	pdf(await paper.ofRevision(actor, number, letter, paperOf(url)), `${number}-${letter}`),
);
