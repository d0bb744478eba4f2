import { and, desc, eq, gt, sql } from 'drizzle-orm';
import * as audit from '../audit/audit';
import { db, type Connection } from '../db/client';
import { membership, person, session, team } from '../db/schema/people';
import type { Actor } from './access';
import { absoluteMs, idleMs } from './limits';
import { hashOf, newToken } from './tokens';

/** What a query reads of a person as a member of a team. */
export const actorColumns = {
	personId: person.id,
	name: person.name,
	email: person.email,
	teamId: team.id,
	teamName: team.name,
	role: membership.role,
};

const alive = () => and(gt(session.expires, sql`now()`), gt(session.endsAt, sql`now()`));

/** The person behind a session token, with the role they have now; undefined where the session is over. */
export async function findActor(token: string): Promise<Actor | undefined> {
	const [actor] = await db()
		.select({ ...actorColumns, signedInAt: session.createdAt })
		.from(session)
		.innerJoin(person, eq(person.id, session.userId))
		.innerJoin(
			membership,
			and(eq(membership.personId, person.id), eq(membership.teamId, session.teamId)),
		)
		.innerJoin(team, eq(team.id, membership.teamId))
		.where(and(eq(session.sessionToken, hashOf(token)), alive()));
	return actor;
}

/** A person as a member of the team they joined first; undefined where they belong to none. */
export async function findMember(personId: string): Promise<Actor | undefined> {
	const [actor] = await db()
		.select(actorColumns)
		.from(membership)
		.innerJoin(person, eq(person.id, membership.personId))
		.innerJoin(team, eq(team.id, membership.teamId))
		.where(eq(membership.personId, personId))
		.orderBy(membership.since, team.id)
		.limit(1);
	return actor;
}

/** Starts a session under a new token, which is returned and kept nowhere. */
export async function open(
	connection: Connection,
	actor: Actor,
	userAgent: string | null,
): Promise<string> {
	const token = newToken();
	await connection.insert(session).values({
		sessionToken: hashOf(token),
		userId: actor.personId,
		teamId: actor.teamId,
		expires: new Date(Date.now() + idleMs),
		endsAt: new Date(Date.now() + absoluteMs),
		userAgent: userAgent?.slice(0, 400) ?? null,
	});
	return token;
}

/** The actor's own sessions, newest first. `id` tells them apart and opens nothing. */
export async function list(actor: Actor, token: string) {
	const rows = await db()
		.select()
		.from(session)
		.where(and(eq(session.userId, actor.personId), alive()))
		.orderBy(desc(session.createdAt));
	return rows.map((row) => ({
		id: row.sessionToken.slice(0, 16),
		current: row.sessionToken === hashOf(token),
		createdAt: row.createdAt.toISOString(),
		userAgent: row.userAgent,
	}));
}

/** Signs out here. */
export async function end(actor: Actor, token: string): Promise<void> {
	await db().transaction(async (tx) => {
		await tx.delete(session).where(eq(session.sessionToken, hashOf(token)));
		await audit.record(tx, actor, 'signed out', `person:${actor.personId}`);
	});
}

/** Signs out everywhere, here too. */
export async function endAll(actor: Actor): Promise<void> {
	await db().transaction(async (tx) => {
		await removeAll(tx, actor);
		await audit.record(tx, actor, 'signed out everywhere', `person:${actor.personId}`);
	});
}

/** Ends every session of the actor within a deed that is written down by itself. */
export async function removeAll(connection: Connection, actor: Actor): Promise<void> {
	await connection.delete(session).where(eq(session.userId, actor.personId));
}
