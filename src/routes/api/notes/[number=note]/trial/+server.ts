import { trialRequest } from '$lib/schemas/trial';
import * as trial from '$lib/server/trial/trial';
import { body } from '$lib/server/web/form';
import { api } from '$lib/server/web/guard';
import { Pace } from '$lib/server/web/pace';
import type { RequestEvent } from './$types';

/** A slider that is dragged asks again and again; a page does so thirty times a second at most. */
const pace = new Pace({ who: 'Your trials', atOnce: 4, burst: 200, perSecond: 40 });

export const GET = api((actor, { params }: RequestEvent) => trial.ranges(actor, params.number));

export const POST = api(async (actor, event: RequestEvent) => {
	const { changes } = await body(event, trialRequest);
	return await pace.run(actor.personId, () => trial.evaluate(actor, event.params.number, changes));
});
