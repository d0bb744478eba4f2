import * as notes from '$lib/server/notes/notes';
import * as revisions from '$lib/server/revisions/revisions';
import { forMember } from '$lib/server/web/guard';
import type { PageServerLoadEvent } from './$types';

export const load = forMember(async (actor, { params }: PageServerLoadEvent) => {
	const { number, letter } = params;
	const { id } = await notes.get(actor, number);
	const frozen = await revisions.get(actor, number, letter);
	// The title as it was frozen: the working copy's may say more than a reader should know.
	return { note: { id, number, title: frozen.content.title }, ...frozen };
});
