import type { Readout, Verdict } from '$lib/calc/results';
import type { CellKind } from '$lib/note/document';
import { z } from 'zod';
import type { Thread } from './comments';
import type { SignOff, Waiver } from './review';

/** A side in an address: a revision's letter, `candidate-2` or `working-copy`. */
const side = z
	.string()
	.regex(
		/^([A-Z]{1,9}|candidate-[1-9]\d{0,8}|working-copy)$/,
		'Name a side as A, candidate-2 or working-copy.',
	)
	.optional();

/** The two sides that are asked for. */
export const comparedSides = z.object({ from: side, to: side });

/** What the address of the page asks for; what cannot be read counts as not said. */
export const comparisonQuery = z.object({
	from: side.catch(undefined),
	to: side.catch(undefined),
	view: z.enum(['columns', 'one']).catch('columns'),
});

/** Something of a note that can be compared. */
export interface Side {
	/** As in an address. */
	key: string;
	kind: 'revision' | 'candidate' | 'working copy';
	/** "Revision A", "Candidate 2", "Working copy". */
	label: string;
	/** Where it stands, in a word or two: "superseded", "returned". */
	standing: string;
	/** When it was frozen or proposed, ISO 8601; null for the working copy, which is compared as it is now. */
	at: string | null;
	/** SHA-256, hexadecimal; null for the working copy. */
	digest: string | null;
}

/** A stretch of a text. What is `same` stands on both sides. */
export interface Part {
	kind: 'same' | 'deleted' | 'inserted';
	text: string;
}

/** How a number moved. Numbers are unrounded. */
export interface Delta {
	/** As they were shown; null where there was none. */
	from: string | null;
	to: string | null;
	/** `to` less `from`; null where they are no numbers of one kind. */
	difference: { value: number; unit: string; text: string } | null;
	/** Share of the size of `from`; null where that is zero or a scale with a zero of its own. */
	relative: { value: number; text: string } | null;
}

interface Place {
	cell: string;
	/** 1-based line of the cell. */
	line: number;
}

/** A quantity, or a line without a name, whose figure is not the same on both sides. */
export interface FigureChange {
	/** Its name on the later side where it has one there; the formula of a line without a name. */
	name: string;
	/** Whether `name` is that of a quantity. */
	named: boolean;
	/** What it was called before; absent where its name stayed. */
	formerName?: string;
	/** `removed` and `added` where only one side defines it. */
	change: 'moved' | 'added' | 'removed';
	from: Readout | null;
	to: Readout | null;
	/** The text behind the line, of the later side. */
	description: string;
	/** Absent where the value is the same. */
	value?: Delta;
	/** Of the expanded uncertainty; absent where that is the same. */
	doubt?: Delta;
	/** Place on the later side where it is there. */
	place: Place;
}

/** A definition that is written differently. */
export interface FormulaChange {
	name: string;
	formerName?: string;
	change: 'changed' | 'added' | 'removed';
	/** The line without its comment, as parts. */
	parts: Part[];
	/** Whether its figure moved too. */
	moved: boolean;
	place: Place;
}

/** What an input contributes to the uncertainty of a quantity, where its share moved. */
export interface ContributionChange {
	input: string;
	/** As shown; null where there is none. */
	from: string | null;
	to: string | null;
	/** Part of the variance, 0 to 1. */
	fromShare: number | null;
	toShare: number | null;
}

export interface BudgetChange {
	quantity: string;
	/** The greatest share on either side first. */
	contributions: ContributionChange[];
}

interface Judged {
	/** As it is written, without its comment. */
	requirement: string;
	verdict: Verdict | null;
	/** "Met, 1.5 % to spare"; "cannot be judged" where its line has an error. */
	text: string;
	place: Place;
}

/** A requirement that is not the same on both sides. One side is null where the requirement came or went. */
export interface RequirementChange {
	from: Judged | null;
	to: Judged | null;
	/** Whether its verdict is another one, or it is judged on one side only. */
	turned: boolean;
	/** What is written differently; absent where nothing is. */
	parts?: Part[];
}

/** A cell that came, went, moved or became one of another kind. Terminals are numbers on the sheet. */
export interface CellChange {
	cell: string;
	change: 'added' | 'removed' | 'moved' | 'kind';
	fromTerminal: number | null;
	toTerminal: number | null;
	fromKind: CellKind | null;
	toKind: CellKind | null;
	/** Beginning of what it says. */
	words: string;
}

/** Lines that differ, with one line around them on either side where there is one. */
export interface Hunk {
	/** 1-based first lines. */
	fromLine: number;
	toLine: number;
	parts: Part[];
}

/** A cell whose text differs. */
export interface TextChange {
	cell: string;
	kind: CellKind;
	fromTerminal: number | null;
	toTerminal: number | null;
	hunks: Hunk[];
}

/** How a quantity's readouts are set; null where nobody chose anything. */
export interface DisplayChange {
	name: string;
	/** "mV, 4 digits" */
	from: string | null;
	to: string | null;
}

/** A picture of quantities over another one that is not the same on both sides. */
export interface SweepChange {
	/** "V_adc over V_max" */
	title: string;
	change: 'moved' | 'added' | 'removed';
	/** The range that is drawn, where it is another one; its points cannot be compared then. */
	range: { from: string; to: string } | null;
	/** Curves with points that moved, came or went. */
	series: { name: string; change: 'moved' | 'added' | 'removed'; moved: number; points: number }[];
	/** Where a curve passes its limit, as it is read; null where it does not on that side. */
	crossings: { name: string; limit: 'lower' | 'upper'; from: string | null; to: string | null }[];
	place: Place;
}

export interface WaiverChange {
	change: 'added' | 'removed';
	waiver: Waiver;
	/** Who signed it. */
	name: string;
}

/** Comments of the time between the two sides. */
export interface CommentChanges {
	/** ISO 8601; `until` is null where the later side is the working copy. */
	since: string;
	until: string | null;
	opened: Thread[];
	closed: Thread[];
	/** Opened before, and open still. */
	left: Thread[];
}

/** What a side says of itself. */
export interface ComparedSide extends Side {
	title: string;
	engine: string;
	signOffs: SignOff[];
	/** Whether edits are still arriving that are not in it. */
	pending: boolean;
	/** Lines that have an error. */
	faults: number;
	/** Ids of its cells in the order of the sheet. */
	cells: string[];
}

/** Everything that differs between two sides of a note. */
export interface Differences {
	title: Part[] | null;
	/** Values that lines state, and those that came or went. */
	inputs: FigureChange[];
	/** What is computed from them. */
	results: FigureChange[];
	formulas: FormulaChange[];
	/** Names that changed and nothing else. */
	renamed: { from: string; to: string }[];
	budgets: BudgetChange[];
	requirements: RequirementChange[];
	cells: CellChange[];
	texts: TextChange[];
	displays: DisplayChange[];
	sweeps: SweepChange[];
}

export interface Comparison extends Differences {
	from: ComparedSide;
	to: ComparedSide;
	waivers: WaiverChange[];
	comments: CommentChanges;
	/** Figures that differ by no more than this share of the larger one count as the same. */
	tolerance: number;
	/** Shares of a budget that differ by less than this count as the same. */
	shareTolerance: number;
}
