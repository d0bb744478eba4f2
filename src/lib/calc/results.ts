/** A cell as the engine reads it. `text` cells are read for their `{{name}}` figures only. */
export interface Cell {
	id: string;
	kind: 'text' | 'calculation' | 'requirement';
	source: string;
}

export interface Options {
	/** Coverage probability of expanded uncertainties, 0 to 1. */
	coverage: number;
	decisionRule: 'simple' | 'guarded';
}

/** A computed number as it is shown. `text` is `number`, a no-break space and `unit`. */
export interface Readout {
	text: string;
	/** Rounded figure with its digits grouped for display, or the text of a value that is no number. */
	number: string;
	/** Display unit with its engineering prefix, '' for a pure number. */
	unit: string;
	/** Half-width shown after ±, same unit; absent while the quantity is exact. */
	doubt?: string;
}

/** A named value. Numbers are unrounded and in `unit`; infinite degrees of freedom are null. */
export interface Quantity {
	cell: string;
	/** 1-based line of the cell. */
	line: number;
	/** Coherent or chosen unit of `value`, '1' for a pure number. */
	unit: string;
	/** null where the quantity is not a scalar number. */
	value: number | null;
	text: string;
	readout: Readout;
	/** Text of the comment after the line. */
	description?: string;
	/** Names the value is computed from, direct ones only, in order of first use. */
	dependsOn: string[];
	/** Dimensions of a value that is no scalar. */
	shape?: number[];
	/** Members of a value that is no scalar, row by row, in `unit`; absent beyond 10 000. */
	values?: number[];
	standardUncertainty?: number;
	degreesOfFreedom?: number | null;
	coverageFactor?: number;
	expandedUncertainty?: number;
}

/** One line of a calculation cell, as the sheet shows it. */
export interface WorkedLine {
	cell: string;
	line: number;
	kind: 'definition' | 'function' | 'expression' | 'comment' | 'blank';
	/** Defined name; absent for bare expressions, comments and blanks. */
	name?: string;
	/** Present when the line has a value to show. */
	readout?: Readout;
}

export type Verdict = 'met' | 'not met' | 'undecided';

/** A requirement line. Lines with errors have no entry here but one in `errors`. */
export interface Requirement {
	cell: string;
	line: number;
	verdict: Verdict;
	/** Distance to the nearest limit in `unit`, negative beyond it. */
	margin: number;
	/** Margin as a share of the limit's magnitude; null where the limit is zero. */
	relativeMargin: number | null;
	unit: string;
	/** "Met, 1.5 % to spare" and the like, without a full stop. */
	text: string;
	/** Compared value in `unit`, and the limits it must keep, for the gauge. */
	value: number;
	lower: number | null;
	upper: number | null;
	valueText: string;
	lowerText: string | null;
	upperText: string | null;
	probability?: number;
}

/** A `{{name}}` of a text cell; `from` and `to` are offsets in the cell's source. */
export interface Figure {
	cell: string;
	from: number;
	to: number;
	/** Absent when the name could not be quoted; `errors` says why. */
	readout?: Readout;
}

export type FaultCode =
	| 'syntax'
	| 'unknownName'
	| 'dimension'
	| 'circle'
	| 'duplicate'
	| 'ambiguous'
	| 'reserved'
	| 'notAllowed'
	| 'waits'
	| 'value'
	| 'overflow'
	| 'tooLong'
	| 'tooLarge'
	| 'tooDeep'
	| 'notComparable';

/** A calculation fault. Columns are 0-based UTF-16 offsets in the line, `to` exclusive. */
export interface Fault {
	cell: string;
	line: number;
	from: number;
	to: number;
	code: FaultCode;
	message: string;
	/** What to do about it, a sentence. */
	mend?: string;
	/** Text that replaces `from`–`to` to mend it, where one click can. */
	replacement?: string;
}

/** Everything the sheet, the API, freezing and print show of a note. Numbers are unrounded. */
export interface Evaluation {
	engine: string;
	quantities: Record<string, Quantity>;
	lines: WorkedLine[];
	requirements: Requirement[];
	figures: Figure[];
	errors: Fault[];
}
