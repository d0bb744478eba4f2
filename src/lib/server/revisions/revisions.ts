import type { Evaluation } from '$lib/calc/results';
import { AppError } from '$lib/errors';
import type { NoteContent } from '$lib/note/document';
import type { ProposalDetails, SignOff, Withdrawal } from '$lib/schemas/review';
import { may } from '$lib/schemas/role';
import { and, desc, eq } from 'drizzle-orm';
import { demand, type Actor } from '../auth/access';
import { db } from '../db/client';
import { candidate, revision } from '../db/schema/review';
import * as notes from '../notes/notes';
import { needsAddress } from './identify';
import * as standings from './standing';

export interface Frozen {
	revision: {
		letter: string;
		/** Sequence number of the working copy it was taken at. */
		seq: number;
		digest: string;
		frozenAt: string;
		engine: string;
		signOffs: SignOff[];
		authors: { id: string; name: string }[];
		/** What was said when it was proposed; null for those frozen before that was asked. */
		details: ProposalDetails | null;
		/** Letter of the note's newest revision: another one supersedes this. */
		newest: string;
		/** The next revision and why it replaces this one. */
		supersededBy: { letter: string; reason: string } | null;
		withdrawn: Withdrawal | null;
	};
	/** Whether the actor may withdraw it, and what their signature needs. */
	may: { withdraw: boolean; identify: boolean };
	content: NoteContent;
	results: Evaluation;
}

const noSuchRevision = () => new AppError('notFound', 'There is no such revision.');

/** A frozen revision as it was frozen. */
export async function get(actor: Actor, number: string, letter: string): Promise<Frozen> {
	demand(actor, 'readFrozen');
	const { id } = await notes.get(actor, number);
	const standing = await standings.read(db(), id);
	const found = await read(id, letter, standing);
	const { withdrawn, newest: last } = found.revision;
	return {
		...found,
		may: {
			withdraw: may(actor.role, 'approve') && !withdrawn && last === letter,
			identify: needsAddress(actor, standing.policy),
		},
	};
}

/** The same for those whose right to see it was found otherwise. */
export async function read(
	noteId: string,
	letter: string,
	standing?: standings.Standing,
): Promise<Omit<Frozen, 'may'>> {
	const found = await find(noteId, letter);
	const { revisions } = standing ?? (await standings.read(db(), noteId));
	const { seq, content, results, engine, authors, details } = found.candidate;
	const place = revisions.findIndex((one) => one.letter === letter);
	return {
		revision: {
			letter,
			seq,
			digest: found.revision.digest,
			frozenAt: found.revision.frozenAt.toISOString(),
			engine,
			signOffs: await standings.signOffsOf(db(), found.candidate.id),
			authors,
			details,
			newest: revisions[0]?.letter ?? letter,
			supersededBy: place > 0 ? await successor(noteId, revisions[place - 1]!.letter) : null,
			withdrawn: revisions[place]?.withdrawn ?? null,
		},
		content,
		results,
	};
}

/** Letter of a note's newest revision. Throws AppError `notFound` where nothing is frozen. */
export async function newest(actor: Actor, number: string): Promise<string> {
	demand(actor, 'readFrozen');
	const { id } = await notes.get(actor, number);
	const [row] = await db()
		.select({ letter: revision.letter })
		.from(revision)
		.innerJoin(candidate, eq(candidate.id, revision.candidateId))
		.where(eq(revision.noteId, id))
		.orderBy(desc(candidate.ordinal))
		.limit(1);
	if (!row) throw new AppError('notFound', 'Nothing of this note is frozen yet.');
	return row.letter;
}

async function successor(noteId: string, letter: string) {
	const { details } = (await find(noteId, letter)).candidate;
	return { letter, reason: details?.changes ?? '' };
}

async function find(noteId: string, letter: string) {
	if (!/^[A-Z]{1,9}$/.test(letter)) throw noSuchRevision();
	const [found] = await db()
		.select({ revision, candidate })
		.from(revision)
		.innerJoin(candidate, eq(candidate.id, revision.candidateId))
		.where(and(eq(revision.noteId, noteId), eq(revision.letter, letter)));
	if (!found) throw noSuchRevision();
	return found;
}
