import { createHmac, timingSafeEqual } from 'node:crypto';
import { mailKinds, type MailKind } from '$lib/schemas/mail';
import { env } from '../env';

interface Named {
	teamId: string;
	personId: string;
	kind: MailKind | 'daily';
}

/** A token by which whoever has the mail can stop the like of it. It does nothing else and does not expire. */
export function make({ teamId, personId, kind }: Named): string {
	const named = Buffer.from(`${kind} ${teamId} ${personId}`).toString('base64url');
	return `${named}.${mark(named)}`;
}

/** What a token names; undefined where it is not one of ours. */
export function read(token: string): Named | undefined {
	const [named = '', given = ''] = token.split('.');
	const [expected, shown] = [Buffer.from(mark(named)), Buffer.from(given)];
	if (expected.length !== shown.length || !timingSafeEqual(expected, shown)) return undefined;
	const [word, teamId = '', personId = ''] = Buffer.from(named, 'base64url').toString().split(' ');
	const kind = [...mailKinds, 'daily' as const].find((one) => one === word);
	return kind && { teamId, personId, kind };
}

function mark(named: string): string {
	return createHmac('sha256', env().AUTH_SECRET).update(`stop mail\n${named}`).digest('base64url');
}
