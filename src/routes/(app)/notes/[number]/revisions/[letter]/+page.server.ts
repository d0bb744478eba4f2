import { redirect } from '@sveltejs/kit';
import { withdrawing } from '$lib/schemas/review';
import { may } from '$lib/schemas/role';
import { linkChoice, newLink } from '$lib/schemas/sharing';
import { env } from '$lib/server/env';
import * as notes from '$lib/server/notes/notes';
import { codeOf } from '$lib/server/paper/code';
import { keptComments } from '$lib/server/revisions/kept-comments';
import * as revisions from '$lib/server/revisions/revisions';
import { withdraw } from '$lib/server/revisions/withdraw';
import * as links from '$lib/server/sharing/links';
import { action } from '$lib/server/web/form';
import { forMember } from '$lib/server/web/guard';
import type { PageServerLoadEvent, RequestEvent } from './$types';

export const load = forMember(async (actor, { params }: PageServerLoadEvent) => {
	const { number, letter } = params;
	const { id } = await notes.get(actor, number);
	const { may: allowed, ...frozen } = await revisions.get(actor, number, letter);
	// The title as it was frozen: the working copy's may say more than a reader should know.
	return {
		note: { id, number, title: frozen.content.title },
		...frozen,
		allowed,
		comments: await keptComments(actor, number, letter),
		code: codeOf(frozen.revision.digest),
		links: may(actor.role, 'share') ? await links.list(actor, number, letter) : null,
		origin: env().ORIGIN,
	};
});

export const actions = {
	share: action('share', newLink, async (actor, said, { params, setHeaders }: RequestEvent) => {
		setHeaders({ 'cache-control': 'no-store' });
		const { token } = await links.create(actor, params.number, params.letter, said);
		return { action: 'share', made: { name: said.name, token } };
	}),
	revoke: action('revoke', linkChoice, async (actor, { id }, { params }: RequestEvent) => ({
		action: 'revoke',
		done: `“${await links.revoke(actor, params.number, params.letter, id)}” is revoked.`,
	})),
	withdraw: action('withdraw', withdrawing, async (actor, said, { params }: RequestEvent) => {
		await withdraw(actor, params.number, params.letter, said);
		redirect(303, `/notes/${params.number}/revisions/${params.letter}`);
	}),
};
