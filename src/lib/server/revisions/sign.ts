import type { Meaning } from '$lib/schemas/review';
import type { Actor } from '../auth/access';
import type { Connection } from '../db/client';
import { signOff } from '../db/schema/review';
import type { CandidateRow } from './standing';

/** Writes a sign-off that binds the actor to the candidate by its digest. */
export async function sign(
	connection: Connection,
	actor: Actor,
	candidate: Pick<CandidateRow, 'id' | 'digest'>,
	meaning: Meaning,
	at: Date,
	reason: string | null = null,
): Promise<void> {
	await connection.insert(signOff).values({
		candidateId: candidate.id,
		meaning,
		personId: actor.personId,
		personName: actor.name,
		role: actor.role,
		reason,
		method: 'password',
		digest: candidate.digest,
		at,
	});
}
