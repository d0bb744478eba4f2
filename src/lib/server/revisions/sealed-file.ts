import { AppError } from '$lib/errors';
import { and, eq } from 'drizzle-orm';
import { demand, type Actor } from '../auth/access';
import { db } from '../db/client';
import { revision } from '../db/schema/review';
import * as notes from '../notes/notes';
import * as entries from '../signed-record/entries';
import { seal } from './digest';

/** A frozen revision as a file that can be verified without this installation: canonical JSON with its seal. */
export async function download(actor: Actor, number: string, letter: string): Promise<string> {
	demand(actor, 'readFrozen');
	return read((await notes.get(actor, number)).id, letter);
}

/** The same for those whose right to see it was found otherwise. */
export async function read(noteId: string, letter: string): Promise<string> {
	const [found] = await db()
		.select({ canonical: revision.canonical, entry: revision.entry })
		.from(revision)
		.where(and(eq(revision.noteId, noteId), eq(revision.letter, letter)));
	if (!found) throw new AppError('notFound', 'There is no such revision.');
	if (found.entry === null) {
		throw new AppError('notFound', 'This revision was frozen before revisions were sealed.');
	}
	const [entry] = await entries.read(db(), [found.entry]);
	return sealedFile(found.canonical, entry);
}

/** Members in the order of RFC 8785, so that the whole file is canonical. */
function sealedFile(canonical: string, entry: unknown): string {
	return `{"format":"halfdigit-sealed-revision-1","revision":${canonical},"seal":${seal(entry).canonical}}`;
}
