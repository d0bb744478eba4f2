import { env } from '../env';

/** The way to go on after signing in: a path of this site, or the list of notes. */
export function safePath(wanted: string | null): string {
	const { ORIGIN } = env();
	if (!wanted?.startsWith('/') || !URL.canParse(wanted, ORIGIN)) return '/notes';
	const url = new URL(wanted, ORIGIN);
	return url.origin === ORIGIN ? url.pathname + url.search : '/notes';
}
