import type { CandidateStatus, SignOff } from '$lib/schemas/review';
import type { NoteState } from '$lib/schemas/notes';
import { asc, desc, eq } from 'drizzle-orm';
import type { Connection } from '../db/client';
import { noteStanding } from '../db/schema/listing';
import { candidate, revision, signOff } from '../db/schema/review';
import { letterOf } from './letters';

export type CandidateRow = typeof candidate.$inferSelect;
type RevisionRow = Pick<
	typeof revision.$inferSelect,
	'candidateId' | 'letter' | 'digest' | 'frozenAt'
>;

/** Where a note stands, as its rows say. */
export interface Standing {
	state: NoteState;
	nextLetter: string;
	candidate: CandidateRow | null;
	candidateState: CandidateStatus['state'] | null;
	signOffs: SignOff[];
	/** Newest first. */
	revisions: RevisionRow[];
}

/** Reads where a note stands. What decides on it reads it under the note's lock. */
export async function read(connection: Connection, noteId: string): Promise<Standing> {
	const [standing] = await connection
		.select({ state: noteStanding.state })
		.from(noteStanding)
		.where(eq(noteStanding.noteId, noteId));
	const [newest] = await connection
		.select()
		.from(candidate)
		.where(eq(candidate.noteId, noteId))
		.orderBy(desc(candidate.ordinal))
		.limit(1);
	const revisions = await connection
		.select({
			candidateId: revision.candidateId,
			letter: revision.letter,
			digest: revision.digest,
			frozenAt: revision.frozenAt,
		})
		.from(revision)
		.innerJoin(candidate, eq(candidate.id, revision.candidateId))
		.where(eq(revision.noteId, noteId))
		.orderBy(desc(candidate.ordinal));
	const signOffs = newest ? await signOffsOf(connection, newest.id) : [];
	return {
		state: standing?.state ?? 'draft',
		nextLetter: letterOf(revisions.length + 1),
		candidate: newest ?? null,
		candidateState: newest ? stateOf(signOffs) : null,
		signOffs,
		revisions,
	};
}

/** The sign-offs of a candidate, oldest first. */
export async function signOffsOf(connection: Connection, candidateId: string): Promise<SignOff[]> {
	const rows = await connection
		.select()
		.from(signOff)
		.where(eq(signOff.candidateId, candidateId))
		.orderBy(asc(signOff.at), asc(signOff.id));
	return rows.map(({ meaning, personName, personId, at, reason }) => ({
		meaning,
		name: personName,
		personId,
		at: at.toISOString(),
		reason,
	}));
}

function stateOf(signOffs: SignOff[]): CandidateStatus['state'] {
	const has = (meaning: SignOff['meaning']) => signOffs.some((one) => one.meaning === meaning);
	if (has('returned')) return 'returned';
	if (has('approved')) return 'approved';
	return has('checked') ? 'checked' : 'in check';
}

/** The newest candidate while nobody has approved or returned it. */
export function openCandidate(standing: Standing): CandidateRow | null {
	const open = standing.candidateState === 'in check' || standing.candidateState === 'checked';
	return open ? standing.candidate : null;
}

/** A candidate as pages see it. */
export function candidateStatus(standing: Standing): CandidateStatus | null {
	if (!standing.candidate || !standing.candidateState) return null;
	const { ordinal, digest, authors } = standing.candidate;
	return { ordinal, state: standing.candidateState, digest, authors, signOffs: standing.signOffs };
}
