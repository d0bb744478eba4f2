import { randomUUID } from 'node:crypto';
import { error, type HandleServerError } from '@sveltejs/kit';
import { AppError, statusOf } from '$lib/errors';
import { log } from '../log';

/** An expected failure as SvelteKit's error with its status and sentence; anything else as it is. */
export function toHttp(thrown: unknown): unknown {
	if (!(thrown instanceof AppError)) return thrown;
	try {
		error(statusOf[thrown.code], { message: thrown.message });
	} catch (http) {
		return http;
	}
}

/** What a stranger sees of a fault nobody expected: a sentence and the id of its log line. */
export const handleError: HandleServerError = ({ error: thrown, event, status }) => {
	if (status === 404) return { message: 'There is no such page.' };
	if (status < 500) return { message: 'This request could not be understood.' };
	const id = randomUUID().slice(0, 8);
	log().error({ id, err: thrown, route: event.route.id, method: event.request.method }, 'fault');
	return { message: 'Something went wrong on the server. Your saved work is safe.', id };
};
