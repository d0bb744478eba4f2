import { redirect } from '@sveltejs/kit';
import { listQuery, newNote } from '$lib/schemas/notes';
import * as listing from '$lib/server/notes/listing';
import * as notes from '$lib/server/notes/notes';
import { action } from '$lib/server/web/form';
import { forMember } from '$lib/server/web/guard';
import type { PageServerLoadEvent, RequestEvent } from './$types';

export const load = forMember(async (actor, { url }: PageServerLoadEvent) => {
	const query = listQuery.parse(Object.fromEntries(url.searchParams));
	return { notes: await listing.list(actor, query), query };
});

export const actions = {
	create: action('create', newNote, async (actor, { title }, _event: RequestEvent) => {
		const { number } = await notes.create(actor, { title });
		redirect(303, `/notes/${number}`);
	}),
};
