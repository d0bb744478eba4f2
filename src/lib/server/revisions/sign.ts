import type { Meaning, SignatureDetails } from '$lib/schemas/review';
import type { Actor } from '../auth/access';
import type { Connection } from '../db/client';
import { signOff } from '../db/schema/review';
import * as entries from '../signed-record/entries';
import type { CandidateRow } from './standing';

/** Writes a sign-off and its entry in the signed record, which bind the actor to the candidate. Returns its time. */
export async function sign(
	tx: Connection,
	actor: Actor,
	candidate: Pick<CandidateRow, 'id' | 'noteId' | 'digest' | 'details'>,
	meaning: Meaning,
	{ reason = null, details = {} }: { reason?: string | null; details?: SignatureDetails } = {},
): Promise<Date> {
	const { personId, name, role, teamId } = actor;
	const { index, at } = await entries.append(tx, {
		kind: 'signature',
		document: {
			team: teamId,
			note: candidate.noteId,
			number: candidate.details?.note.number ?? '',
		},
		revision: candidate.details?.letter ?? '',
		contentHash: candidate.digest,
		signer: { id: personId, name, role },
		meaning,
		method: 'password',
		reason,
		...details,
	});
	await tx.insert(signOff).values({
		candidateId: candidate.id,
		meaning,
		personId,
		personName: name,
		role,
		reason,
		method: 'password',
		digest: candidate.digest,
		details,
		entry: index,
		at,
	});
	return at;
}
