import { unlocking } from '$lib/schemas/sharing';
import { codeOf } from '$lib/server/paper/code';
import * as revisions from '$lib/server/revisions/revisions';
import { unlock, visit } from '$lib/server/web/shared';
import type { PageServerLoadEvent, RequestEvent } from './$types';

export const load = async (event: PageServerLoadEvent) => {
	const found = await visit(event, async ({ noteId, number, letter }) => {
		const { revision, content, results } = await revisions.read(noteId, letter);
		return { number, revision, content, results, code: codeOf(revision.digest) };
	});
	return { found };
};

export const actions = { unlock: (event: RequestEvent) => unlock(event, unlocking) };
