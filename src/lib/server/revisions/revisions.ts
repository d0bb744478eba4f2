import type { Evaluation } from '$lib/calc/results';
import { AppError } from '$lib/errors';
import type { NoteContent } from '$lib/note/document';
import type { SignOff } from '$lib/schemas/review';
import { and, desc, eq } from 'drizzle-orm';
import { demand, type Actor } from '../auth/access';
import { db } from '../db/client';
import { candidate, revision } from '../db/schema/review';
import * as notes from '../notes/notes';
import { signOffsOf } from './standing';

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
		/** Letter of the note's newest revision: another one supersedes this. */
		newest: string;
	};
	content: NoteContent;
	results: Evaluation;
}

const noSuchRevision = () => new AppError('notFound', 'There is no such revision.');

/** A frozen revision as it was frozen. */
export async function get(actor: Actor, number: string, letter: string): Promise<Frozen> {
	demand(actor, 'readFrozen');
	const { id } = await notes.get(actor, number);
	if (!/^[A-Z]{1,9}$/.test(letter)) throw noSuchRevision();
	const [found] = await db()
		.select({ revision, candidate })
		.from(revision)
		.innerJoin(candidate, eq(candidate.id, revision.candidateId))
		.where(and(eq(revision.noteId, id), eq(revision.letter, letter)));
	if (!found) throw noSuchRevision();
	const { seq, content, results, engine, authors } = found.candidate;
	return {
		revision: {
			letter,
			seq,
			digest: found.revision.digest,
			frozenAt: found.revision.frozenAt.toISOString(),
			engine,
			signOffs: await signOffsOf(db(), found.candidate.id),
			authors,
			newest: (await newestLetter(id)) ?? letter,
		},
		content,
		results,
	};
}

/** Letter of a note's newest revision. Throws AppError `notFound` where nothing is frozen. */
export async function newest(actor: Actor, number: string): Promise<string> {
	demand(actor, 'readFrozen');
	const letter = await newestLetter((await notes.get(actor, number)).id);
	if (letter === undefined) throw new AppError('notFound', 'Nothing of this note is frozen yet.');
	return letter;
}

async function newestLetter(noteId: string): Promise<string | undefined> {
	const [row] = await db()
		.select({ letter: revision.letter })
		.from(revision)
		.innerJoin(candidate, eq(candidate.id, revision.candidateId))
		.where(eq(revision.noteId, noteId))
		.orderBy(desc(candidate.ordinal))
		.limit(1);
	return row?.letter;
}
