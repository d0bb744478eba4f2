import { AppError } from '$lib/errors';
import { and, count, desc, eq, gt, isNull, or, sql } from 'drizzle-orm';
import * as audit from '../audit/audit';
import { db } from '../db/client';
import { membership, person, team } from '../db/schema/people';
import { apiToken } from '../db/schema/tokens';
import { demand, type Actor } from './access';
import { actorColumns } from './sessions';
import { hashOf, newToken } from './tokens';

/** Tokens a person may have at once in a team. */
const most = 50;

const shape = /^hd_[\w-]{43}$/;

const ownedBy = ({ personId, teamId }: Actor) =>
	and(eq(apiToken.personId, personId), eq(apiToken.teamId, teamId), isNull(apiToken.revokedAt));

/**
 * Makes a token for the actor's scripts, for so many days, or until it is revoked where `days` is null. `token` is
 * kept nowhere. Throws AppError `conflict` where the actor has too many.
 */
export async function create(
	actor: Actor,
	{ name, days }: { name: string; days: number | null },
): Promise<{ id: string; token: string }> {
	demand(actor, 'readFrozen');
	const token = `hd_${newToken()}`;
	return await db().transaction(async (tx) => {
		const [had] = await tx.select({ tokens: count() }).from(apiToken).where(ownedBy(actor));
		if ((had?.tokens ?? 0) >= most) {
			throw new AppError('conflict', `You have ${most} tokens. Revoke one that is not used first.`);
		}
		const { personId, teamId } = actor;
		const expiresAt =
			days === null ? null : sql<Date>`now() + make_interval(hours => ${24 * days})`;
		const [made] = await tx
			.insert(apiToken)
			.values({ personId, teamId, name, hash: hashOf(token), expiresAt })
			.returning({ id: apiToken.id, expiresAt: apiToken.expiresAt });
		if (!made) throw new Error('the token was not stored');
		await audit.record(tx, actor, 'token created', `token:${made.id}`, {
			after: { name, expiresAt: made.expiresAt?.toISOString() ?? null },
		});
		return { id: made.id, token };
	});
}

/** The actor's tokens that are not revoked, newest first. */
export async function list(actor: Actor) {
	demand(actor, 'readFrozen');
	const rows = await db()
		.select({
			token: apiToken,
			expired: sql<boolean>`coalesce(${apiToken.expiresAt} <= now(), false)`,
		})
		.from(apiToken)
		.where(ownedBy(actor))
		.orderBy(desc(apiToken.createdAt), apiToken.id);
	return rows.map(({ token: { id, name, createdAt, lastUsedAt, expiresAt }, expired }) => ({
		id,
		name,
		createdAt: createdAt.toISOString(),
		lastUsedAt: lastUsedAt?.toISOString() ?? null,
		expiresAt: expiresAt?.toISOString() ?? null,
		expired,
	}));
}

/** Ends one of the actor's own tokens and returns its name. */
export async function revoke(actor: Actor, id: string): Promise<string> {
	demand(actor, 'readFrozen');
	return await db().transaction(async (tx) => {
		const [ended] = await tx
			.update(apiToken)
			.set({ revokedAt: sql`now()` })
			.where(and(eq(apiToken.id, id), ownedBy(actor)))
			.returning({ name: apiToken.name });
		if (!ended) throw new AppError('notFound', 'There is no such token.');
		await audit.record(tx, actor, 'token revoked', `token:${id}`, { before: { name: ended.name } });
		return ended.name;
	});
}

/** The person behind a token, with the role they have now, and its use written down; undefined where it does not count. */
export async function findActor(token: string): Promise<Actor | undefined> {
	if (!shape.test(token)) return undefined;
	const [found] = await db()
		.select({ id: apiToken.id, actor: actorColumns, touch: longUnused })
		.from(apiToken)
		.innerJoin(person, eq(person.id, apiToken.personId))
		.innerJoin(
			membership,
			and(eq(membership.personId, person.id), eq(membership.teamId, apiToken.teamId)),
		)
		.innerJoin(team, eq(team.id, membership.teamId))
		.where(
			and(
				eq(apiToken.hash, hashOf(token)),
				isNull(apiToken.revokedAt),
				or(isNull(apiToken.expiresAt), gt(apiToken.expiresAt, sql`now()`)),
			),
		);
	if (found?.touch) {
		await db()
			.update(apiToken)
			.set({ lastUsedAt: sql`now()` })
			.where(and(eq(apiToken.id, found.id), longUnused));
	}
	return found?.actor;
}

const longUnused = sql<boolean>`coalesce(${apiToken.lastUsedAt} < now() - interval '1 minute', true)`;
