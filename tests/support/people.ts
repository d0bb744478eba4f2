import { randomBytes } from 'node:crypto';
import type { Actor } from '$lib/server/auth/access';
import { sessionCookie } from '$lib/server/auth/cookie';
import * as passwords from '$lib/server/auth/passwords';
import * as sessions from '$lib/server/auth/sessions';
import { db } from '$lib/server/db/client';
import { membership, person, team } from '$lib/server/db/schema/people';
import type { Role } from '$lib/schemas/role';
import { eq } from 'drizzle-orm';

/** A new team. */
export async function makeTeam(name = 'Test Bench'): Promise<{ teamId: string; teamName: string }> {
	const [made] = await db().insert(team).values({ name }).returning({ id: team.id });
	if (!made) throw new Error('the team was not stored');
	return { teamId: made.id, teamName: name };
}

/** A new person with a role in a team. */
export async function makeMember(
	{ teamId, teamName }: { teamId: string; teamName: string },
	role: Role,
	name = 'Robin Example',
): Promise<Actor> {
	const email = `${randomBytes(6).toString('hex')}@example.test`;
	const [made] = await db().insert(person).values({ name, email }).returning({ id: person.id });
	if (!made) throw new Error('the person was not stored');
	await db().insert(membership).values({ teamId, personId: made.id, role });
	return { personId: made.id, name, email, teamId, teamName, role };
}

/** Opens a session and returns its Cookie header. */
export async function signIn(actor: Actor): Promise<string> {
	return `${sessionCookie().name}=${await sessions.open(db(), actor, null)}`;
}

/** The password of everybody in the tests who has one. */
export const testPassword = 'plaice-anvil-51-harbour';
let testHash: Promise<string> | undefined;

/** Gives a person the tests' password, so that they can sign. */
export async function givePassword(actor: Actor): Promise<Actor> {
	const passwordHash = await (testHash ??= passwords.hash(testPassword));
	await db().update(person).set({ passwordHash }).where(eq(person.id, actor.personId));
	return actor;
}

export type Cast = Record<
	'reader' | 'author' | 'engineer' | 'approver' | 'second' | 'administrator',
	Actor
>;

/** A team with everybody a note's life needs: who wrote it, who checks it, two who approve, who reads, who administers. */
export async function makeCast(teamName?: string): Promise<Cast> {
	const team = await makeTeam(teamName);
	const member = async (role: Role, name: string) =>
		givePassword(await makeMember(team, role, name));
	return {
		reader: await member('reader', 'Reader Example'),
		author: await member('engineer', 'Author Example'),
		engineer: await member('engineer', 'Engineer Example'),
		approver: await member('approver', 'Approver Example'),
		second: await member('approver', 'Second Example'),
		administrator: await member('administrator', 'Administrator Example'),
	};
}
