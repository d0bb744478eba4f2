import type { CandidateStatus, Policy, SignOff, Withdrawal } from '$lib/schemas/review';
import type { NoteState } from '$lib/schemas/notes';
import { asc, desc, eq } from 'drizzle-orm';
import type { Connection } from '../db/client';
import { noteStanding } from '../db/schema/listing';
import { note } from '../db/schema/notes';
import { candidate, revision, signOff, withdrawal } from '../db/schema/review';
import { letterOf } from './letters';
import * as policies from './policy';

export type CandidateRow = typeof candidate.$inferSelect;
type RevisionRow = Pick<
	typeof revision.$inferSelect,
	'candidateId' | 'letter' | 'digest' | 'frozenAt'
> & { withdrawn: Withdrawal | null };

/** Where a note stands, as its rows say. */
export interface Standing {
	state: NoteState;
	nextLetter: string;
	candidate: CandidateRow | null;
	candidateState: CandidateStatus['state'] | null;
	signOffs: SignOff[];
	/** Newest first. */
	revisions: RevisionRow[];
	/** What the note's team asks of a sign-off. */
	policy: Policy;
}

/** Reads where a note stands. What decides on it reads it under the note's lock. */
export async function read(connection: Connection, noteId: string): Promise<Standing> {
	const [standing] = await connection
		.select({ state: noteStanding.state, teamId: note.teamId })
		.from(noteStanding)
		.innerJoin(note, eq(note.id, noteStanding.noteId))
		.where(eq(noteStanding.noteId, noteId));
	const [newest] = await connection
		.select()
		.from(candidate)
		.where(eq(candidate.noteId, noteId))
		.orderBy(desc(candidate.ordinal))
		.limit(1);
	const revisions = await revisionsOf(connection, noteId);
	const signOffs = newest ? await signOffsOf(connection, newest.id) : [];
	const policy = await policies.read(connection, standing?.teamId ?? '');
	return {
		state: standing?.state ?? 'draft',
		nextLetter: letterOf(revisions.length + 1),
		candidate: newest ?? null,
		candidateState: newest ? stateOf(signOffs, policy) : null,
		signOffs,
		revisions,
		policy,
	};
}

async function revisionsOf(connection: Connection, noteId: string): Promise<RevisionRow[]> {
	const rows = await connection
		.select({ revision, withdrawal })
		.from(revision)
		.innerJoin(candidate, eq(candidate.id, revision.candidateId))
		.leftJoin(withdrawal, eq(withdrawal.revisionId, revision.id))
		.where(eq(revision.noteId, noteId))
		.orderBy(desc(candidate.ordinal));
	return rows.map(({ revision: { candidateId, letter, digest, frozenAt }, withdrawal: taken }) => ({
		candidateId,
		letter,
		digest,
		frozenAt,
		withdrawn: taken && {
			name: taken.personName,
			at: taken.at.toISOString(),
			reason: taken.reason,
		},
	}));
}

/** The sign-offs of a candidate, oldest first. */
export async function signOffsOf(connection: Connection, candidateId: string): Promise<SignOff[]> {
	const rows = await connection
		.select()
		.from(signOff)
		.where(eq(signOff.candidateId, candidateId))
		.orderBy(asc(signOff.at), asc(signOff.entry), asc(signOff.id));
	return rows.map(({ meaning, personName, personId, at, reason, details }) => ({
		meaning,
		name: personName,
		personId,
		at: at.toISOString(),
		reason,
		...details,
	}));
}

function stateOf(signOffs: SignOff[], policy: Policy): CandidateStatus['state'] {
	const count = (meaning: SignOff['meaning']) =>
		signOffs.filter((one) => one.meaning === meaning).length;
	if (count('returned') > 0) return 'returned';
	if (count('approved') > 0) return 'approved';
	return count('checked') >= policy.checkers ? 'checked' : 'in check';
}

/** The newest candidate while nobody has approved or returned it. */
export function openCandidate(standing: Standing): CandidateRow | null {
	const open = standing.candidateState === 'in check' || standing.candidateState === 'checked';
	return open ? standing.candidate : null;
}

/** A candidate as pages see it. */
export function candidateStatus(standing: Standing): CandidateStatus | null {
	if (!standing.candidate || !standing.candidateState) return null;
	const { ordinal, digest, authors, details } = standing.candidate;
	return {
		ordinal,
		state: standing.candidateState,
		digest,
		authors,
		signOffs: standing.signOffs,
		details,
	};
}
