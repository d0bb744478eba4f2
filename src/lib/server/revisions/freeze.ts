import type { SignatureDetails } from '$lib/schemas/review';
import { and, asc, eq, isNotNull } from 'drizzle-orm';
import * as audit from '../audit/audit';
import type { Actor } from '../auth/access';
import type { Connection } from '../db/client';
import { revision, signOff } from '../db/schema/review';
import * as entries from '../signed-record/entries';
import type { SignedStatement } from '../signed-record/statement';
import { seal } from './digest';
import { reviewRecord } from './review-record';
import { sign } from './sign';
import { snapshotOf } from './snapshot';
import type { CandidateRow, Standing } from './standing';

/** Signs a candidate as approved and freezes it; returns its letter. Call it under the note's lock. */
export async function freeze(
	tx: Connection,
	actor: Actor,
	number: string,
	standing: Standing,
	candidate: CandidateRow,
	details: SignatureDetails,
): Promise<string> {
	const { noteId } = candidate;
	const at = await sign(tx, actor, candidate, 'approved', { details });
	const letter = standing.nextLetter;
	const [before] = standing.revisions;
	const team = { id: actor.teamId, name: actor.teamName };
	const { canonical, digest } = seal({
		format: 'halfdigit-revision-2',
		team,
		note: { id: noteId, number },
		letter,
		proposal: snapshotOf(candidate),
		candidate: candidate.digest,
		policy: standing.policy,
		review: await reviewRecord(tx, noteId, before?.frozenAt),
		signatures: await signaturesOn(tx, candidate.id),
		frozenAt: at.toISOString(),
		previous: before?.digest ?? null,
		replaces: before ? { letter: before.letter, reason: candidate.details?.changes ?? '' } : null,
	});
	const { personId, name, role, teamId } = actor;
	const { index } = await entries.append(tx, {
		kind: 'freeze',
		document: { team: teamId, note: noteId, number },
		revision: letter,
		contentHash: digest,
		signer: { id: personId, name, role },
		meaning: 'frozen',
		method: 'password',
		reason: null,
	});
	await tx.insert(revision).values({
		noteId,
		candidateId: candidate.id,
		letter,
		canonical,
		digest,
		frozenAt: at,
		entry: index,
	});
	await audit.record(tx, actor, 'revision frozen', `note:${noteId}`, {
		after: { letter, digest, candidate: candidate.digest, ...details },
	});
	return letter;
}

async function signaturesOn(tx: Connection, candidateId: string): Promise<SignedStatement[]> {
	const rows = await tx
		.select({ entry: signOff.entry })
		.from(signOff)
		.where(and(eq(signOff.candidateId, candidateId), isNotNull(signOff.entry)))
		.orderBy(asc(signOff.entry));
	return entries.read(
		tx,
		rows.map(({ entry }) => entry ?? -1),
	);
}
