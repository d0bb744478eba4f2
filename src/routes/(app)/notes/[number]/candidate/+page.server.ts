import { redirect } from '@sveltejs/kit';
import { approving, fieldsNamed, returning, signing, waivePrefix } from '$lib/schemas/review';
import { threadFilter } from '$lib/schemas/thread-filter';
import * as threads from '$lib/server/comments/threads';
import * as comparison from '$lib/server/comparison/comparison';
import * as notes from '$lib/server/notes/notes';
import * as candidates from '$lib/server/revisions/candidates';
import { action } from '$lib/server/web/form';
import { forMember } from '$lib/server/web/guard';
import type { PageServerLoadEvent, RequestEvent } from './$types';

export const load = forMember(async (actor, { params: { number }, url }: PageServerLoadEvent) => {
	const { candidate, review } = await candidates.get(actor, number);
	const { id, epoch, changedAt } = await notes.get(actor, number);
	return {
		note: { id, number, title: candidate.content.title, epoch, changedAt },
		candidate,
		review,
		threads: await threads.list(actor, number),
		filter: threadFilter.parse(Object.fromEntries(url.searchParams)),
		sides: await comparison.sides(actor, number),
	};
});

export const actions = {
	check: action('check', signing, async (actor, seen, { params }: RequestEvent) => {
		await candidates.check(actor, params.number, seen);
		redirect(303, `/notes/${params.number}/candidate`);
	}),
	approve: action('approve', approving, async (actor, seen, { params }: RequestEvent) => {
		const letter = await candidates.approve(actor, params.number, {
			...seen,
			acknowledged: seen.caution === 'on',
			waivers: fieldsNamed(waivePrefix, seen),
		});
		redirect(303, `/notes/${params.number}/revisions/${letter}`);
	}),
	return: action('return', returning, async (actor, seen, { params }: RequestEvent) => {
		await candidates.sendBack(actor, params.number, seen);
		redirect(303, `/notes/${params.number}/candidate`);
	}),
};
