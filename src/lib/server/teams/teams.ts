import type { Role } from '$lib/schemas/role';
import * as audit from '../audit/audit';
import * as passwords from '../auth/passwords';
import { db } from '../db/client';
import { membership, person, team } from '../db/schema/people';

interface Founder {
	name: string;
	email: string;
	password: string;
	role: Role;
}

/** Makes a team with its first people, all or nothing. For whoever runs the installation, who is no member. */
export async function found(
	name: string,
	people: Founder[],
): Promise<{ id: string; personIds: string[] }> {
	const hashes = await Promise.all(people.map((one) => passwords.hash(one.password)));
	return await db().transaction(async (tx) => {
		const [made] = await tx.insert(team).values({ name }).returning({ id: team.id });
		if (!made) throw new Error('the team was not stored');
		const personIds: string[] = [];
		for (const [index, { name, email, role }] of people.entries()) {
			const personId = crypto.randomUUID();
			await tx.insert(person).values({ id: personId, name, email, passwordHash: hashes[index] });
			await tx.insert(membership).values({ teamId: made.id, personId, role });
			await audit.record(tx, { teamId: made.id, personId }, 'joined', `team:${made.id}`, {
				after: { role },
			});
			personIds.push(personId);
		}
		return { id: made.id, personIds };
	});
}
