import * as keptTrials from '$lib/server/trial/kept-trials';
import { api } from '$lib/server/web/guard';
import type { RequestEvent } from './$types';

export const DELETE = api(async (actor, { params }: RequestEvent) => {
	await keptTrials.remove(actor, params.number, params.trial);
	return {};
});
