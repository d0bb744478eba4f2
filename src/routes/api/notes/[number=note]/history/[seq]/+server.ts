import { AppError } from '$lib/errors';
import { seqInAddress } from '$lib/schemas/history';
import * as history from '$lib/server/notes/history';
import { api } from '$lib/server/web/guard';
import type { RequestEvent } from './$types';

export const GET = api((actor, { params }: RequestEvent) => {
	const seq = seqInAddress.safeParse(params.seq);
	if (!seq.success) throw new AppError('notFound', 'The note has no such moment.');
	return history.at(actor, params.number, seq.data);
});
