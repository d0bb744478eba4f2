import { z } from 'zod';
import type { NoteState } from './notes';
import { typed } from './text';

const password = z.string().min(1, 'Give your password.').max(200, 'At most 200 characters.');

/** Asks for the password only: what is signed is made at that moment. */
export const proposing = z.object({ password });

/** `digest` says which candidate the person looked at. */
export const signing = z.object({
	password,
	digest: z.string().regex(/^[0-9a-f]{64}$/, 'Reload the page and look at the candidate again.'),
});
export const returning = signing.extend({
	reason: typed.trim().min(1, 'Say why it goes back.').max(2000, 'At most 2 000 characters.'),
});

export type Meaning = 'prepared' | 'checked' | 'approved' | 'returned';

export interface SignOff {
	meaning: Meaning;
	/** Name as printed at the time. */
	name: string;
	personId: string;
	/** ISO 8601 */
	at: string;
	reason: string | null;
}

/** A reason why the candidate cannot be frozen, with the cell to look at where there is one. */
export interface Blocker {
	text: string;
	cellId?: string;
}

export interface CandidateStatus {
	ordinal: number;
	state: 'in check' | 'checked' | 'returned' | 'approved';
	/** SHA-256, hexadecimal. */
	digest: string;
	authors: { id: string; name: string }[];
	signOffs: SignOff[];
}

export interface FrozenStatus {
	letter: string;
	/** SHA-256, hexadecimal. */
	digest: string;
	frozenAt: string;
}

/** Where a note stands on its way to a frozen revision; what the foot bar and title block show. */
export interface ReviewStatus {
	state: NoteState;
	nextLetter: string;
	/** The newest candidate, whatever became of it. */
	candidate: CandidateStatus | null;
	/** Newest first. */
	revisions: FrozenStatus[];
	/** Why the newest candidate cannot be frozen now; empty where none is open. */
	blockers: Blocker[];
	/** What this person may do now; for each refusal a sentence says why. */
	can: Record<'propose' | 'check' | 'approve' | 'return', true | string>;
}
