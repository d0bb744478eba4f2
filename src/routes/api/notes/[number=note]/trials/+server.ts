import { trialsRequest } from '$lib/schemas/quantities';
import * as trials from '$lib/server/quantities/trials';
import { body } from '$lib/server/web/form';
import { api } from '$lib/server/web/guard';
import { jsonLines } from '$lib/server/web/json-lines';
import type { RequestEvent } from './$types';

export const POST = api(async (actor, event: RequestEvent) => {
	const draw = await trials.prepare(actor, event.params.number, await body(event, trialsRequest));
	return jsonLines(async ({ send, signal }) => {
		const onProgress = (drawn: number, total: number) => send({ drawn, total });
		return { quantity: await draw({ onProgress, signal }) };
	});
});
