import * as audit from '../audit/audit';
import type { Actor } from '../auth/access';
import type { Connection } from '../db/client';
import { revision } from '../db/schema/review';
import { seal } from './digest';
import { sign } from './sign';
import { signOffsOf, type CandidateRow, type Standing } from './standing';

/** Signs a candidate as approved and freezes it; returns its letter. Call it under the note's lock. */
export async function freeze(
	tx: Connection,
	actor: Actor,
	number: string,
	standing: Standing,
	candidate: CandidateRow,
): Promise<string> {
	const at = new Date();
	await sign(tx, actor, candidate, 'approved', at);
	const letter = standing.nextLetter;
	const { canonical, digest } = seal({
		format: 'halfdigit-revision-1',
		team: { id: actor.teamId, name: actor.teamName },
		note: number,
		letter,
		content: candidate.content,
		results: candidate.results,
		engine: candidate.engine,
		authors: candidate.authors,
		candidate: candidate.digest,
		signOffs: await signOffsOf(tx, candidate.id),
		frozenAt: at.toISOString(),
		previous: standing.revisions[0]?.digest ?? null,
	});
	await tx.insert(revision).values({
		noteId: candidate.noteId,
		candidateId: candidate.id,
		letter,
		canonical,
		digest,
		frozenAt: at,
	});
	await audit.record(tx, actor, 'revision frozen', `note:${candidate.noteId}`, {
		after: { letter, digest, candidate: candidate.digest },
	});
	return letter;
}
