import type { ReviewStatus } from '$lib/schemas/review';
import { demand, type Actor } from '../auth/access';
import { db, type Connection } from '../db/client';
import * as notes from '../notes/notes';
import * as blockers from './blockers';
import * as conditions from './conditions';
import { needsAddress } from './identify';
import * as rules from './rules';
import * as standings from './standing';

/** Where a note stands on its way to a frozen revision, and what the actor may do about it. */
export async function status(actor: Actor, number: string): Promise<ReviewStatus> {
	demand(actor, 'readWorkingCopy');
	const { id } = await notes.get(actor, number);
	return statusOf(db(), actor, await standings.read(db(), id));
}

/** The same from rows that were read already. */
export async function statusOf(
	connection: Connection,
	actor: Actor,
	standing: standings.Standing,
): Promise<ReviewStatus> {
	const open = standings.openCandidate(standing);
	const blocked = open ? await blockers.of(connection, open, standing.policy) : [];
	return {
		state: standing.state,
		nextLetter: standing.nextLetter,
		candidate: standings.candidateStatus(standing),
		revisions: standing.revisions.map(({ letter, digest, frozenAt, withdrawn }) => ({
			letter,
			digest,
			frozenAt: frozenAt.toISOString(),
			withdrawn,
		})),
		blockers: blocked,
		conditions: conditions.of(standing, blocked),
		identify: needsAddress(actor, standing.policy),
		can: rules.answers(actor, standing, blocked),
	};
}
