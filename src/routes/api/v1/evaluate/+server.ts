import { evaluationRequest } from '$lib/schemas/evaluation';
import * as scripts from '$lib/server/scripts/scripts';
import { api } from '$lib/server/web/guard';
import { payload } from '$lib/server/web/payload';
import type { RequestEvent } from './$types';

export const POST = api(async (actor, event: RequestEvent) =>
	scripts.evaluate(actor, await payload(event, evaluationRequest)),
);
