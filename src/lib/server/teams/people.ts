import { AppError } from '$lib/errors';
import { may, type Role } from '$lib/schemas/role';
import { and, asc, eq, sql } from 'drizzle-orm';
import * as audit from '../audit/audit';
import { demand, type Actor } from '../auth/access';
import { db } from '../db/client';
import { membership, person, team } from '../db/schema/people';

/** The people of the actor's team by name, with their roles. */
export async function list(
	actor: Actor,
): Promise<{ id: string; name: string; email: string; role: Role }[]> {
	demand(actor, 'administer');
	return db()
		.select({ id: person.id, name: person.name, email: person.email, role: membership.role })
		.from(membership)
		.innerJoin(person, eq(person.id, membership.personId))
		.where(eq(membership.teamId, actor.teamId))
		.orderBy(asc(sql`lower(${person.name})`), asc(person.id));
}

/** Gives a person of the team another role. Throws AppError `conflict` where nobody would be left to administer. */
export async function setRole(actor: Actor, personId: string, role: Role): Promise<void> {
	demand(actor, 'administer');
	await db().transaction(async (tx) => {
		// The team's row is the lock: two administrators cannot lower each other at once.
		await tx.select({ id: team.id }).from(team).where(eq(team.id, actor.teamId)).for('update');
		const members = await tx
			.select({ personId: membership.personId, role: membership.role })
			.from(membership)
			.where(eq(membership.teamId, actor.teamId));
		const before = members.find((member) => member.personId === personId);
		if (!before) throw new AppError('notFound', 'There is no such person in your team.');
		if (before.role === role) return;
		const left = members.filter((m) => m.personId !== personId && may(m.role, 'administer'));
		if (left.length === 0 && !may(role, 'administer')) {
			throw new AppError(
				'conflict',
				'The team needs an administrator. Make somebody else one first.',
			);
		}
		await tx
			.update(membership)
			.set({ role })
			.where(and(eq(membership.teamId, actor.teamId), eq(membership.personId, personId)));
		await audit.record(tx, actor, 'role changed', `person:${personId}`, {
			before: { role: before.role },
			after: { role },
		});
	});
}
