import { redirect } from '@sveltejs/kit';
import { askPrefix, fieldsNamed, proposing } from '$lib/schemas/review';
import { may } from '$lib/schemas/role';
import * as threads from '$lib/server/comments/threads';
import { current } from '$lib/server/evaluation/store';
import * as notes from '$lib/server/notes/notes';
import * as candidates from '$lib/server/revisions/candidates';
import { askable } from '$lib/server/revisions/proposal';
import * as review from '$lib/server/revisions/review';
import * as revisions from '$lib/server/revisions/revisions';
import { action } from '$lib/server/web/form';
import { forMember } from '$lib/server/web/guard';
import type { PageServerLoadEvent, RequestEvent } from './$types';

export const load = forMember(async (actor, { params: { number } }: PageServerLoadEvent) => {
	if (!may(actor.role, 'readWorkingCopy')) {
		redirect(303, `/notes/${number}/revisions/${await revisions.newest(actor, number)}`);
	}
	const { id, title, epoch, changedAt } = await notes.get(actor, number);
	const [stored, comments, status, people] = await Promise.all([
		current(id),
		threads.list(actor, number),
		review.status(actor, number),
		askable(actor),
	]);
	return {
		note: { id, number, title, epoch, changedAt },
		content: stored.content,
		evaluation: stored.results,
		threads: comments,
		review: status,
		askable: people,
	};
});

export const actions = {
	propose: action('propose', proposing, async (actor, said, { params, request }: RequestEvent) => {
		const checkers = fieldsNamed(askPrefix, said).map(([id]) => id);
		await candidates.propose(actor, params.number, { ...said, checkers }, request.signal);
		redirect(303, `/notes/${params.number}/candidate`);
	}),
};
