import { json, type Handle, type RequestEvent } from '@sveltejs/kit';
import { AppError } from '$lib/errors';
import * as apiTokens from '../auth/api-tokens';
import { expected, toJson } from './errors';
import { Pace } from './pace';

const routes = '/api/v1/';
const pace = new Pace({ who: 'Your scripts', atOnce: 8, burst: 300, perSecond: 20 });

/**
 * Answers what scripts ask. A token in the Authorization header counts there and no cookie does, so that no other
 * site's page can ask in somebody's name and no origin is looked at. Everything else is for `others`.
 */
export function scriptsOr(others: Handle): Handle {
	return async (input) => {
		const { route, url } = input.event;
		if (route.id?.startsWith(routes)) return answer(input);
		if (route.id !== null || !url.pathname.startsWith(routes)) return others(input);
		return toJson(new AppError('notFound', 'There is no such address for scripts.'));
	};
}

const answer: Handle = async ({ event, resolve }) => {
	const response = await answerTo(event, resolve);
	// What was refused unread is read now, up to the HTTP server's bound: it would block the connection's next request.
	if (!event.request.bodyUsed) await event.request.arrayBuffer().catch(() => undefined);
	return response;
};

async function answerTo(
	event: RequestEvent,
	resolve: Parameters<Handle>[0]['resolve'],
): Promise<Response> {
	try {
		const token = bearerOf(event.request.headers);
		const actor = token === undefined ? undefined : await apiTokens.findActor(token);
		if (!actor) return unauthorised(token);
		event.locals.actor = actor;
		return await pace.run(actor.personId, async () => resolve(event));
	} catch (thrown) {
		const failure = expected(thrown);
		if (!failure) throw thrown;
		return toJson(failure);
	}
}

function bearerOf(headers: Headers): string | undefined {
	return /^Bearer +(\S+)$/i.exec(headers.get('authorization')?.trim() ?? '')?.[1];
}

/** The answer and its header as RFC 6750, 3, has them. */
function unauthorised(token: string | undefined): Response {
	const realm = 'Bearer realm="Halfdigit"';
	const [message, challenge] =
		token === undefined
			? ['Send a token from your account page as "Authorization: Bearer hd_…".', realm]
			: ['This token is revoked, expired or unknown.', `${realm}, error="invalid_token"`];
	return json({ message }, { status: 401, headers: { 'www-authenticate': challenge } });
}
