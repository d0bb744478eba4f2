import type { Moved } from '$lib/calc/moved';
import type { Verdict } from '$lib/calc/results';
import { z } from 'zod';
import { typed } from './text';

/** A quantity that a trial gives another formula. */
export interface TrialChange {
	name: string;
	/** The formula of its line when the trial was begun. */
	from: string;
	/** The formula that is tried. */
	to: string;
}

const formula = typed.min(1, 'A formula is missing.').max(2000, 'At most 2 000 characters.');

/** Most quantities that one trial changes. */
const mostChanges = 50;

export const trialChanges = z
	.array(
		z.strictObject({
			name: typed.min(1).max(100),
			from: typed.max(2000),
			to: formula.refine((text) => !/[\n\r#]/.test(text), 'A formula is one line.'),
		}),
	)
	.min(1, 'Change something first.')
	.max(mostChanges, `At most ${mostChanges} quantities.`)
	.refine((all) => new Set(all.map(({ name }) => name)).size === all.length, {
		message: 'Each quantity once.',
	});

export const trialRequest = z.strictObject({ changes: trialChanges });

export const newKeptTrial = z.strictObject({
	title: typed.trim().min(1, 'Give it a name.').max(100, 'At most 100 characters.'),
	changes: trialChanges,
});

/** What a trial does to a note, and the changed quantities that the note does not define any more. */
export interface TrialAnswer extends Moved {
	gone: string[];
}

/** Between which values an input in doubt lies, in the unit of the quantity, by name. */
export type TrialRanges = Record<string, { lower: number; upper: number }>;

interface JudgedText {
	verdict: Verdict;
	/** "Met, 1.5 % to spare" */
	text: string;
}

/** A trial as a comment keeps it: what was changed, and what that moved at the time. */
export interface AttachedTrial {
	changes: TrialChange[];
	figures: {
		name: string;
		before: string | null;
		after: string | null;
		difference: string | null;
		share: number | null;
	}[];
	verdicts: {
		cell: string;
		line: number;
		/** The requirement as it is written. */
		requirement: string;
		before: JudgedText | null;
		after: JudgedText | null;
	}[];
}

/** A trial that a person keeps for themselves. */
export interface KeptTrial {
	id: string;
	title: string;
	changes: TrialChange[];
	/** ISO 8601 */
	at: string;
}
