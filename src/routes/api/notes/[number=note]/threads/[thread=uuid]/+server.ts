import { threadChange } from '$lib/schemas/comments';
import * as threads from '$lib/server/comments/threads';
import { body } from '$lib/server/web/form';
import { api } from '$lib/server/web/guard';
import type { RequestEvent } from './$types';

export const PATCH = api(async (actor, event: RequestEvent) => {
	const { number, thread } = event.params;
	const { closed } = await body(event, threadChange);
	return threads.setClosed(actor, number, thread, closed);
});
