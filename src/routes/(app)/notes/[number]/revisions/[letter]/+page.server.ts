import { redirect } from '@sveltejs/kit';
import { withdrawing } from '$lib/schemas/review';
import * as notes from '$lib/server/notes/notes';
import * as revisions from '$lib/server/revisions/revisions';
import { withdraw } from '$lib/server/revisions/withdraw';
import { action } from '$lib/server/web/form';
import { forMember } from '$lib/server/web/guard';
import type { PageServerLoadEvent, RequestEvent } from './$types';

export const load = forMember(async (actor, { params }: PageServerLoadEvent) => {
	const { number, letter } = params;
	const { id } = await notes.get(actor, number);
	const { may: allowed, ...frozen } = await revisions.get(actor, number, letter);
	// The title as it was frozen: the working copy's may say more than a reader should know.
	return { note: { id, number, title: frozen.content.title }, ...frozen, allowed };
});

export const actions = {
	withdraw: action('withdraw', withdrawing, async (actor, said, { params }: RequestEvent) => {
		await withdraw(actor, params.number, params.letter, said);
		redirect(303, `/notes/${params.number}/revisions/${params.letter}`);
	}),
};
