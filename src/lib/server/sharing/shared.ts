import { createHmac, timingSafeEqual } from 'node:crypto';
import { AppError } from '$lib/errors';
import { and, eq, gt, isNull, or, sql } from 'drizzle-orm';
import * as passwords from '../auth/passwords';
import * as throttle from '../auth/throttle';
import { hashOf } from '../auth/tokens';
import { db } from '../db/client';
import { note } from '../db/schema/notes';
import { team } from '../db/schema/people';
import { revision } from '../db/schema/review';
import { sharedLink } from '../db/schema/sharing';
import { env } from '../env';
import { formatNumber } from '../notes/number';

/** What an open link leads to. */
export interface Shared {
	noteId: string;
	number: string;
	letter: string;
}

/** How long a password that was given counts. */
export const unlockedMs = 12 * 60 * 60_000;

const shape = /^[\w-]{43}$/;
const longUnused = sql<boolean>`coalesce(${sharedLink.lastUsedAt} < now() - interval '1 minute', true)`;

/** The same for a token that never was, that ended and that was revoked, so that nobody learns which. */
const leadsNowhere = () =>
	new AppError(
		'notFound',
		'This link leads nowhere: it is mistyped, or it has ended. Ask whoever gave it to you for a new one.',
	);

/**
 * What a token opens, and its use written down. `locked` instead where the link asks for a password and `proof` is not
 * that of one given lately. Throws AppError `notFound`.
 */
export async function open(token: string, proof: string | undefined): Promise<Shared | 'locked'> {
	const found = await find(token);
	if (found.passwordHash !== null && !isProof(proof, found)) return 'locked';
	if (found.touch) {
		await db()
			.update(sharedLink)
			.set({ lastUsedAt: sql`now()` })
			.where(and(eq(sharedLink.id, found.id), longUnused));
	}
	const { noteId, number, letter } = found;
	return { noteId, number, letter };
}

/**
 * Checks a link's password and returns the proof that opens it for a while. Throws AppError `forbidden` where it is
 * wrong, `tooMany` where it was tried too often, `notFound` as `open` does.
 */
export async function unlock(token: string, password: string, address: string): Promise<string> {
	const found = await find(token);
	const attempt = await throttle.begin(`shared link ${found.id}`, address);
	if (!(await passwords.verify(found.passwordHash, password))) {
		throw new AppError('forbidden', 'The password is wrong.');
	}
	await throttle.succeed(db(), attempt);
	const until = String(Date.now() + unlockedMs);
	return `${until}.${signed(until, found)}`;
}

type Link = Awaited<ReturnType<typeof find>>;

async function find(token: string) {
	if (!shape.test(token)) throw leadsNowhere();
	const [found] = await db()
		.select({
			id: sharedLink.id,
			passwordHash: sharedLink.passwordHash,
			noteId: revision.noteId,
			prefix: team.notePrefix,
			count: note.number,
			letter: revision.letter,
			touch: longUnused,
		})
		.from(sharedLink)
		.innerJoin(revision, eq(revision.id, sharedLink.revisionId))
		.innerJoin(note, eq(note.id, revision.noteId))
		.innerJoin(team, eq(team.id, note.teamId))
		.where(
			and(
				eq(sharedLink.hash, hashOf(token)),
				isNull(sharedLink.revokedAt),
				or(isNull(sharedLink.expiresAt), gt(sharedLink.expiresAt, sql`now()`)),
			),
		);
	if (!found) throw leadsNowhere();
	const { prefix, count, ...link } = found;
	return { ...link, number: formatNumber(prefix, count) };
}

function isProof(proof: string | undefined, link: Link): boolean {
	const [until = '', given = ''] = proof?.split('.') ?? [];
	if (!(Number(until) > Date.now())) return false;
	const [a, b] = [Buffer.from(given), Buffer.from(signed(until, link))];
	return a.length === b.length && timingSafeEqual(a, b);
}

/** Another password makes another proof. */
function signed(until: string, { id, passwordHash }: Link): string {
	return createHmac('sha256', env().AUTH_SECRET)
		.update(`halfdigit shared link\n${id}\n${passwordHash ?? ''}\n${until}`)
		.digest('base64url');
}
