import { newComment } from '$lib/schemas/comments';
import * as threads from '$lib/server/comments/threads';
import { body } from '$lib/server/web/form';
import { api } from '$lib/server/web/guard';
import type { RequestEvent } from './$types';

export const POST = api(async (actor, event: RequestEvent) => {
	const { number, thread } = event.params;
	return threads.reply(actor, number, thread, await body(event, newComment));
}, 201);
