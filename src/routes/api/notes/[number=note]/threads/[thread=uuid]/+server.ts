import { threadChange } from '$lib/schemas/comments';
import * as threads from '$lib/server/comments/threads';
import { body } from '$lib/server/web/form';
import { api } from '$lib/server/web/guard';
import type { RequestEvent } from './$types';

export const PATCH = api(async (actor, event: RequestEvent) => {
	const { number, thread } = event.params;
	const change = await body(event, threadChange);
	return 'closed' in change
		? threads.setClosed(actor, number, thread, change.closed)
		: threads.setBlocking(actor, number, thread, change.blocking);
});
