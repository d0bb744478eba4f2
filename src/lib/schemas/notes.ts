import { z } from 'zod';
import { typed } from './text';

/** Where a note stands. Derived from candidates and sign-offs, never stored. */
export type NoteState = 'draft' | 'in check' | 'checked' | 'returned' | 'frozen' | 'withdrawn';

/** A row of the list of notes. */
export interface NoteRow {
	/** MN-014 */
	number: string;
	title: string;
	state: NoteState;
	/** Letter of the last frozen revision. */
	revision: string | null;
	/** Letter the next frozen revision will get. */
	nextLetter: string;
	requirements: Record<'met' | 'notMet' | 'undecided', number>;
	/** Lines with an error. */
	faults: number;
	changedAt: string;
	changedBy: string;
}

export const listQuery = z.object({
	q: typed.trim().max(200).catch(''),
	state: z
		.enum(['all', 'draft', 'in check', 'checked', 'returned', 'frozen', 'withdrawn', 'not met'])
		.catch('all'),
	sort: z
		.enum(['number', 'title', 'state', 'revision', 'requirements', 'changed'])
		.catch('changed'),
	order: z.enum(['asc', 'desc']).catch('desc'),
});
export type ListQuery = z.infer<typeof listQuery>;

export const newNote = z.object({
	title: typed.trim().min(1, 'Give the note a title.').max(200, 'At most 200 characters.'),
});
