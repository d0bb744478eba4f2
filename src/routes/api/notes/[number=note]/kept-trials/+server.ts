import { newKeptTrial } from '$lib/schemas/trial';
import * as keptTrials from '$lib/server/trial/kept-trials';
import { body } from '$lib/server/web/form';
import { api } from '$lib/server/web/guard';
import type { RequestEvent } from './$types';

export const GET = api((actor, { params }: RequestEvent) => keptTrials.list(actor, params.number));

export const POST = api(
	async (actor, event: RequestEvent) =>
		keptTrials.keep(actor, event.params.number, await body(event, newKeptTrial)),
	201,
);
