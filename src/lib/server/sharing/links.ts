import { AppError } from '$lib/errors';
import type { SharedLink } from '$lib/schemas/sharing';
import { and, count, desc, eq, isNull, sql } from 'drizzle-orm';
import * as audit from '../audit/audit';
import { demand, type Actor } from '../auth/access';
import * as passwords from '../auth/passwords';
import { hashOf, newToken } from '../auth/tokens';
import { db } from '../db/client';
import { person } from '../db/schema/people';
import { revision } from '../db/schema/review';
import { sharedLink } from '../db/schema/sharing';
import * as notes from '../notes/notes';

/** Links that one revision may have at once. */
const most = 50;

/**
 * Makes a link to a frozen revision, for so many days, or until it is revoked where `days` is null; with a password
 * where one is given. `token` is kept nowhere. Throws AppError `conflict` where the revision has too many.
 */
export async function create(
	actor: Actor,
	number: string,
	letter: string,
	{ name, days, password }: { name: string; days: number | null; password: string },
): Promise<{ id: string; token: string }> {
	demand(actor, 'share');
	const { noteId, revisionId } = await find(actor, number, letter);
	const token = newToken();
	const passwordHash = password === '' ? null : await passwords.hash(password);
	return await db().transaction(async (tx) => {
		const [had] = await tx
			.select({ links: count() })
			.from(sharedLink)
			.where(and(eq(sharedLink.revisionId, revisionId), isNull(sharedLink.revokedAt)));
		if ((had?.links ?? 0) >= most) {
			throw new AppError('conflict', `This revision has ${most} links. Revoke one of them first.`);
		}
		const expiresAt =
			days === null ? null : sql<Date>`now() + make_interval(hours => ${24 * days})`;
		const { personId } = actor;
		const [made] = await tx
			.insert(sharedLink)
			.values({ revisionId, personId, name, hash: hashOf(token), passwordHash, expiresAt })
			.returning({ id: sharedLink.id, expiresAt: sharedLink.expiresAt });
		if (!made) throw new Error('the link was not stored');
		await audit.record(tx, actor, 'revision shared', `note:${noteId}`, {
			after: {
				link: made.id,
				letter,
				name,
				expiresAt: made.expiresAt?.toISOString() ?? null,
				password: passwordHash !== null,
			},
		});
		return { id: made.id, token };
	});
}

/** The links of a revision, newest first. */
export async function list(actor: Actor, number: string, letter: string): Promise<SharedLink[]> {
	demand(actor, 'share');
	const { revisionId } = await find(actor, number, letter);
	const rows = await db()
		.select({
			link: sharedLink,
			madeBy: person.name,
			expired: sql<boolean>`coalesce(${sharedLink.expiresAt} <= now(), false)`,
		})
		.from(sharedLink)
		.innerJoin(person, eq(person.id, sharedLink.personId))
		.where(eq(sharedLink.revisionId, revisionId))
		.orderBy(desc(sharedLink.createdAt), sharedLink.id);
	return rows.map(({ link, madeBy, expired }) => ({
		id: link.id,
		name: link.name,
		madeBy,
		hasPassword: link.passwordHash !== null,
		createdAt: link.createdAt.toISOString(),
		lastUsedAt: link.lastUsedAt?.toISOString() ?? null,
		expiresAt: link.expiresAt?.toISOString() ?? null,
		state: link.revokedAt ? 'revoked' : expired ? 'expired' : 'open',
	}));
}

/** Ends a link, whoever made it, and returns its name. */
export async function revoke(
	actor: Actor,
	number: string,
	letter: string,
	id: string,
): Promise<string> {
	demand(actor, 'share');
	const { noteId, revisionId } = await find(actor, number, letter);
	return await db().transaction(async (tx) => {
		const [ended] = await tx
			.update(sharedLink)
			.set({ revokedAt: sql`now()` })
			.where(
				and(
					eq(sharedLink.id, id),
					eq(sharedLink.revisionId, revisionId),
					isNull(sharedLink.revokedAt),
				),
			)
			.returning({ name: sharedLink.name });
		if (!ended) throw new AppError('notFound', 'There is no such link.');
		await audit.record(tx, actor, 'shared link revoked', `note:${noteId}`, {
			before: { link: id, letter, name: ended.name },
		});
		return ended.name;
	});
}

async function find(actor: Actor, number: string, letter: string) {
	const { id: noteId } = await notes.get(actor, number);
	const [found] = await db()
		.select({ id: revision.id })
		.from(revision)
		.where(and(eq(revision.noteId, noteId), eq(revision.letter, letter)));
	if (!found) throw new AppError('notFound', 'There is no such revision.');
	return { noteId, revisionId: found.id };
}
