import { json, redirect, type Handle } from '@sveltejs/kit';
import { AppError } from '$lib/errors';
import type { Actor } from '../auth/access';
import { env } from '../env';
import { expected, toHttp, toJson } from './errors';

const changing = new Set(['POST', 'PUT', 'PATCH', 'DELETE']);

/** Refuses changes that another site's page asks for, whatever their content type. Browsers always name their origin. */
export const sameOrigin: Handle = ({ event, resolve }) => {
	const { method, headers } = event.request;
	if (changing.has(method) && headers.get('origin') !== env().ORIGIN) {
		return json({ message: 'This request does not come from this site.' }, { status: 403 });
	}
	return resolve(event);
};

/** Sends strangers to the sign-in page; an API route answers 401. */
export const signedIn: Handle = ({ event, resolve }) => {
	const route = event.route.id ?? '';
	if (event.locals.actor) return resolve(event);
	if (route.startsWith('/api/')) {
		return json({ message: 'Sign in first.' }, { status: 401 });
	}
	if (route.startsWith('/(app)')) {
		const to = event.url.pathname + event.url.search;
		redirect(303, `/sign-in?${new URLSearchParams({ to }).toString()}`);
	}
	return resolve(event);
};

/** Headers that keep every answer from being framed, guessed at or told to other sites. */
export const headers: Handle = async ({ event, resolve }) => {
	const response = await resolve(event);
	const set = (name: string, value: string) => {
		if (!response.headers.has(name)) response.headers.set(name, value);
	};
	set('x-content-type-options', 'nosniff');
	set('referrer-policy', 'same-origin');
	set('cross-origin-opener-policy', 'same-origin');
	set('permissions-policy', 'camera=(), microphone=(), geolocation=()');
	set('content-security-policy', "default-src 'none'; frame-ancestors 'none'");
	if (/^\/\(public\)\/(shared|r)\//.test(event.route.id ?? '')) {
		// Whoever has the address sees it: no cache and no search engine should.
		response.headers.set('cache-control', 'no-store');
		response.headers.set('x-robots-tag', 'noindex, nofollow, noarchive');
	}
	if (event.locals.actor) set('cache-control', 'private, no-cache');
	if (env().ORIGIN.startsWith('https:')) set('strict-transport-security', 'max-age=31536000');
	return response;
};

interface Known {
	locals: App.Locals;
}

function actorOf({ locals }: Known): Actor {
	if (!locals.actor) throw new AppError('unauthenticated', 'Sign in first.');
	return locals.actor;
}

/** A load or action for the signed-in person. AppErrors become error pages. */
export function forMember<E extends Known, T>(
	deed: (actor: Actor, event: E) => Promise<T>,
): (event: E) => Promise<T> {
	return async (event) => {
		try {
			return await deed(actorOf(event), event);
		} catch (thrown) {
			throw toHttp(thrown);
		}
	};
}

/**
 * An API route's method for the signed-in person: what it returns is sent as JSON unless it is a response already,
 * AppErrors as `{ message }`.
 */
export function api<E extends Known>(
	deed: (actor: Actor, event: E) => Promise<unknown>,
	status = 200,
): (event: E) => Promise<Response> {
	return async (event) => {
		try {
			const answer = await deed(actorOf(event), event);
			return answer instanceof Response ? answer : json(answer, { status });
		} catch (thrown) {
			const failure = expected(thrown);
			if (!failure) throw thrown;
			return toJson(failure);
		}
	};
}
