import { randomBytes } from 'node:crypto';
import type { Actor } from '$lib/server/auth/access';
import { sessionCookie } from '$lib/server/auth/cookie';
import * as sessions from '$lib/server/auth/sessions';
import { db } from '$lib/server/db/client';
import { membership, person, team } from '$lib/server/db/schema/people';
import type { Role } from '$lib/schemas/role';

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
