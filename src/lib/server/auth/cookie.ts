import { env } from '../env';

/** The session cookie's name and attributes, one answer for whoever sets, reads or ends it. */
export function sessionCookie() {
	const secure = env().ORIGIN.startsWith('https:');
	return {
		// The prefix makes browsers refuse the cookie from another host of the domain.
		name: secure ? '__Host-halfdigit.session' : 'halfdigit.session',
		options: { httpOnly: true, sameSite: 'lax', path: '/', secure },
	} as const;
}

/** The session token in a Cookie header; undefined where there is none. */
export function tokenIn(header: string | undefined): string | undefined {
	const { name } = sessionCookie();
	for (const pair of header?.split(';') ?? []) {
		const [key, value] = pair.trim().split('=');
		if (key === name && value) return value;
	}
	return undefined;
}
