import { randomUUID } from 'node:crypto';
import { error, json, type HandleServerError } from '@sveltejs/kit';
import { AppError, statusOf } from '$lib/errors';
import { isOutage } from '../db/outage';
import { log } from '../log';

/** The failure as an expected one, with a sentence for strangers; undefined for a fault nobody expected. */
export function expected(thrown: unknown): AppError | undefined {
	if (thrown instanceof AppError) return thrown;
	if (!isOutage(thrown)) return undefined;
	log().error({ err: thrown }, 'the database cannot be reached');
	return new AppError(
		'unavailable',
		'The database cannot be reached just now. Try again in a moment.',
		{ cause: thrown },
	);
}

/** An expected failure as SvelteKit's error with its status and sentence; anything else as it is. */
export function toHttp(thrown: unknown): unknown {
	const failure = expected(thrown);
	if (!failure) return thrown;
	try {
		error(statusOf[failure.code], { message: failure.message });
	} catch (http) {
		return http;
	}
}

/** An expected failure as an API route answers it: its sentence, and the faults or the time to wait where it has them. */
export function toJson({ code, message, details }: AppError): Response {
	const { faults, waitMs } = details;
	const headers = new Headers();
	if (typeof waitMs === 'number') headers.set('retry-after', String(Math.ceil(waitMs / 1000)));
	return json(faults === undefined ? { message } : { message, faults }, {
		status: statusOf[code],
		headers,
	});
}

/** What a stranger sees of a fault nobody expected: a sentence and the id of its log line. */
export const handleError: HandleServerError = ({ error: thrown, event, status }) => {
	if (status === 404) return { message: 'There is no such page.' };
	if (status < 500) return { message: 'This request could not be understood.' };
	const id = randomUUID().slice(0, 8);
	log().error({ id, err: thrown, route: event.route.id, method: event.request.method }, 'fault');
	return { message: 'Something went wrong on the server. Your saved work is safe.', id };
};
