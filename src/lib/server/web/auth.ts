import { DrizzleAdapter } from '@auth/drizzle-adapter';
import { SvelteKitAuth, type SvelteKitAuthConfig } from '@auth/sveltekit';
import type { Cookies, Handle, RequestEvent } from '@sveltejs/kit';
import type { Actor } from '../auth/access';
import { sessionCookie } from '../auth/cookie';
import { absoluteMs, idleMs, touchMs } from '../auth/limits';
import * as sessions from '../auth/sessions';
import { hashOf } from '../auth/tokens';
import { db } from '../db/client';
import { account, person, session, verificationToken } from '../db/schema/people';
import { env } from '../env';
import { log } from '../log';
import { toHttp } from './errors';

type Adapter = NonNullable<SvelteKitAuthConfig['adapter']>;

let adapter: Adapter | undefined;

/** The Drizzle adapter, with tokens stored as their SHA-256 and sessions that end for good at `endsAt`. */
function storedSessions(): Adapter {
	if (adapter) return adapter;
	const plain = DrizzleAdapter(db(), {
		usersTable: person,
		accountsTable: account,
		sessionsTable: session,
		verificationTokensTable: verificationToken,
	});
	return (adapter = {
		...plain,
		createSession: async (made) => {
			const member = await sessions.findMember(made.userId);
			const row = {
				...made,
				sessionToken: hashOf(made.sessionToken),
				teamId: member?.teamId,
				endsAt: new Date(Date.now() + absoluteMs),
			};
			await plain.createSession?.(row);
			return made;
		},
		getSessionAndUser: async (token) => {
			const found = await plain.getSessionAndUser?.(hashOf(token));
			if (!found || ended(found.session)) return null;
			const { id, name, email, emailVerified } = found.user;
			return {
				session: { ...found.session, sessionToken: token },
				user: { id, name, email, emailVerified },
			};
		},
		updateSession: async (change) => {
			await plain.updateSession?.({ ...change, sessionToken: hashOf(change.sessionToken) });
			return null;
		},
		deleteSession: async (token) => {
			await plain.deleteSession?.(hashOf(token));
		},
	});
}

function ended(row: object): boolean {
	return 'endsAt' in row && row.endsAt instanceof Date && row.endsAt.getTime() <= Date.now();
}

const library = SvelteKitAuth(() => {
	const cookie = sessionCookie();
	return Promise.resolve({
		adapter: storedSessions(),
		// A password is checked by the sign-in page's own action: with a provider for it, no session row would be made.
		providers: [],
		basePath: '/auth',
		secret: env().AUTH_SECRET,
		trustHost: true,
		session: { strategy: 'database', maxAge: idleMs / 1000, updateAge: touchMs / 1000 },
		useSecureCookies: cookie.options.secure,
		cookies: { sessionToken: cookie },
		callbacks: { session: ({ session }) => ({ expires: String(session.expires) }) },
		logger: {
			error: (error) => log().error({ err: error }, 'a session could not be read'),
			warn: (code) => log().warn({ code }, 'sign-in library'),
			debug: () => undefined,
		},
	});
});

/** Gives requests `locals.auth`. Host and X-Forwarded headers do not reach the library: it would build addresses from them. */
export const handle: Handle = ({ event, resolve }) => {
	const { origin, host } = new URL(env().ORIGIN);
	const request = new Request(origin, {
		headers: { host, cookie: event.request.headers.get('cookie') ?? '' },
	});
	const seen = Object.create(event, {
		request: { value: request },
		url: { value: new URL(origin) },
	}) as RequestEvent;
	return library.handle({ event: seen, resolve: () => resolve(event) });
};

/** Puts the signed-in person into `locals.actor`, and lets the library prolong the session in use. */
export const identify: Handle = async ({ event, resolve }) => {
	const token = event.cookies.get(sessionCookie().name);
	const actor = token ? await findActor(token) : undefined;
	if (actor && (await event.locals.auth())) event.locals.actor = actor;
	return resolve(event);
};

async function findActor(token: string): Promise<Actor | undefined> {
	try {
		return await sessions.findActor(token);
	} catch (thrown) {
		throw toHttp(thrown);
	}
}

/** Sets the cookie of a session that was just opened. */
export function remember(cookies: Cookies, token: string): void {
	const { name, options } = sessionCookie();
	cookies.set(name, token, { ...options, maxAge: idleMs / 1000 });
}

/** The session's token as the browser sent it. */
export function tokenOf(cookies: Cookies): string {
	return cookies.get(sessionCookie().name) ?? '';
}

/** Takes the session's cookie away, and everything that pages have kept in the browser. */
export function forget({ cookies, setHeaders }: RequestEvent): void {
	const { name, options } = sessionCookie();
	cookies.delete(name, options);
	setHeaders({ 'clear-site-data': '"storage"' });
}
