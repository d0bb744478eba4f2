import { newThread } from '$lib/schemas/comments';
import * as threads from '$lib/server/comments/threads';
import { body } from '$lib/server/web/form';
import { api } from '$lib/server/web/guard';
import type { RequestEvent } from './$types';

export const GET = api((actor, { params }: RequestEvent) => threads.list(actor, params.number));

export const POST = api(
	async (actor, event: RequestEvent) =>
		threads.open(actor, event.params.number, await body(event, newThread)),
	201,
);
