import { seqInAddress } from '$lib/schemas/history';
import { may } from '$lib/schemas/role';
import * as history from '$lib/server/notes/history';
import * as notes from '$lib/server/notes/notes';
import { forMember } from '$lib/server/web/guard';
import type { PageServerLoadEvent } from './$types';

export const load = forMember(async (actor, { params, url }: PageServerLoadEvent) => {
	const sessions = await history.sessions(actor, params.number);
	const { id, number, title, epoch, changedAt, seq } = await notes.get(actor, params.number);
	const asked = seqInAddress.safeParse(url.searchParams.get('at'));
	return {
		note: { id, number, title, epoch, changedAt, seq },
		sessions,
		moment: await history.at(actor, number, asked.success ? Math.min(asked.data, seq) : seq),
		mayWrite: may(actor.role, 'write'),
	};
});
