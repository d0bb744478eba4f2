/**
 * A cell of formulas or prose. `text` cells are read for their `{{name}}` figures only; one of kind `curve` is a picture
 * of quantities over the range of another, `Vadc over Vmax from 0 V to 40 V`.
 */
export interface SourceCell {
	id: string;
	kind: 'text' | 'calculation' | 'requirement' | 'curve';
	source: string;
}

/** A column of bench readings; its name is a quantity of the note. */
export interface Column {
	name: string;
	unit: string;
	/** In `unit`. */
	values: number[];
	/** Standard uncertainty of each value, same unit. */
	uncertainties?: number[];
}

export interface ReadingsCell {
	id: string;
	kind: 'readings';
	columns: Column[];
}

/** A least-squares curve through two columns. It defines the functions `name(x)` and `name_inverse(y)`. */
export interface CurveCell {
	id: string;
	kind: 'curve';
	name: string;
	/** Names of the columns. */
	x: string;
	y: string;
	/** 1 is a straight line. */
	degree: number;
	/** Whether points count by the uncertainties of the y column. */
	weighted?: boolean;
}

/** A cell as the engine reads it. */
export type Cell = SourceCell | ReadingsCell | CurveCell;

export interface Options {
	/** Coverage probability of expanded uncertainties, 0 to 1. */
	coverage: number;
	decisionRule: 'simple' | 'guarded';
	/** Standard uncertainties that a normal input's interval reaches to either side in the worst case, 3 by default. */
	normalInterval?: number;
	/** Quantities whose budget, worst case and formula are wanted; none where absent. */
	detail?: 'all' | string[];
	monteCarlo?: MonteCarloOptions;
	/** How readouts are set, by the name of the quantity; the others are set as usual. */
	shown?: Readonly<Record<string, Display>>;
}

/** How a quantity's readouts are set. A unit that does not fit the quantity counts for nothing. */
export interface Display {
	/** As typed, `mV`. */
	unit?: string;
	/** Significant digits of the value. */
	digits?: number;
}

export interface MonteCarloOptions {
	quantities: string[];
	/** 1 000 000 where nothing is said. */
	trials?: number;
	/** Stops once the results are stable (JCGM 101:2008, 7.9). */
	adaptive?: boolean;
	seed: number;
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
	/** What must be known beside the uncertainty: sentences. */
	remarks?: string[];
	/** Set where second-order terms change u by more than 1 %, or are too many to know. */
	needsMonteCarlo?: boolean;
	worstCase?: WorstCase;
	/** The greatest contribution first. */
	budget?: BudgetRow[];
	formula?: FormulaTex;
	/** Numbers as they are shown, where details are asked for. */
	texts?: { standardUncertainty: string };
	monteCarlo?: MonteCarlo;
}

/** A definition as TeX. */
export interface FormulaTex {
	/** `name = formula`, names as symbols. */
	symbols: string;
	/** The formula with the values of its names put in; absent where it has no names or is very long. */
	figures?: string;
}

/** Lowest and highest value over the intervals of the inputs, in the quantity's unit. */
export interface WorstCase {
	lower: number;
	upper: number;
	/** Proved rather than searched for. */
	exact: boolean;
	text: string;
}

/** One input's part in a quantity's uncertainty. */
export interface BudgetRow {
	/** Name of the quantity that states the input, with a number where it states several. */
	input: string;
	/** Unit of the input's numbers. */
	unit: string;
	value: number;
	standardUncertainty: number;
	degreesOfFreedom: number | null;
	distribution: string;
	/** In the quantity's unit for each unit of the input. */
	sensitivity: number;
	/** |sensitivity| × standard uncertainty, in the quantity's unit. */
	contribution: number;
	/** Part of the variance. */
	share: number;
	/** The numbers as they are shown, each with its unit. */
	texts: {
		value: string;
		standardUncertainty: string;
		contribution: string;
		sensitivity: string;
	};
}

/** Trials of a quantity, numbers in its unit. */
export interface MonteCarlo {
	trials: number;
	/** Trials that gave no value. */
	invalid: number;
	seed: number;
	mean: number;
	standardUncertainty: number;
	/** Probabilistically symmetric and shortest interval of the note's coverage. */
	symmetric: [number, number];
	shortest: [number, number];
	histogram: { from: number; to: number; counts: number[] };
	/** Whether the first-order interval agrees with the trials (JCGM 101:2008, clause 8); null without one. */
	validated: boolean | null;
	/** With adaptive trials: whether the results became stable. */
	stable?: boolean;
	texts: { mean: string; standardUncertainty: string; symmetric: string; shortest: string };
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
	/** Expanded uncertainty of the value, in `unit`; absent while it is exact. */
	expandedUncertainty?: number;
	/** Guard band w at each limit, in `unit`: U of the distance to it; absent while that is exact. */
	guardBand?: { lower: number | null; upper: number | null };
	/** Names that it uses, in order of first use. */
	dependsOn: string[];
	/** Probability that the requirement is fulfilled (JCGM 106:2012, 7). */
	probability: number;
}

/** A fitted curve. Numbers are in the units of its columns. */
export interface Curve {
	cell: string;
	degree: number;
	weighted: boolean;
	points: number;
	xUnit: string;
	yUnit: string;
	/** Of rising powers of x, with their standard uncertainties and covariance. */
	coefficients: { value: number; standardUncertainty: number; unit: string }[];
	covariance: number[][];
	/** null without degrees of freedom. */
	residualStandardDeviation: number | null;
	/** null for a constant y. */
	rSquared: number | null;
	degreesOfFreedom: number;
	/** y less the curve, reading by reading. */
	residuals: number[];
	range: { lower: number; upper: number };
	/** Whether it has an inverse on its range. */
	monotonic: boolean;
	/** Curves of other degrees through the same readings, where details are asked for. */
	comparison?: {
		degrees: {
			degree: number;
			residualStandardDeviation: number | null;
			fStatistic: number | null;
			pValue: number | null;
			leaveOneOut: number | null;
		}[];
		leastLeaveOneOut: number | null;
		lastSignificant: number | null;
	};
}

/** How the numbers of an axis are shown: times `factor`, in `unit` with its prefix, '' for pure numbers. */
export interface AxisUnit {
	factor: number;
	unit: string;
}

/**
 * Quantities over the range of another, as a curve cell draws them: the note is computed at every point. The quantity
 * that takes the range keeps the doubt that its line states. Numbers are unrounded; where a point has no value they are null.
 */
export interface Sweep {
	cell: string;
	/** Line of the cell that says it. */
	line: number;
	/** Text of the comment behind the line. */
	description?: string;
	over: {
		name: string;
		/** Unit of all `x`. */
		unit: string;
		shown: AxisUnit;
		/** What the note says it is, and how that is read. */
		present: number;
		presentText: string;
		/** Its line states a doubt, which it keeps at every point. */
		inDoubt?: true;
	};
	logarithmic: boolean;
	/** Ascending. */
	x: number[];
	/** Unit of all numbers of `series` and `limits`. */
	unit: string;
	shown: AxisUnit;
	series: SweepSeries[];
	/** Requirements whose value is one of the quantities. */
	limits: SweepLimit[];
	/** What must be known beside the picture: sentences. */
	remarks?: string[];
}

export interface SweepSeries {
	name: string;
	values: (number | null)[];
	/** Half-width of the band at each point; absent where the quantity is exact at all of them. */
	expandedUncertainties?: (number | null)[];
	/** Ends of the worst case at each point; absent where the quantity is exact at all of them. */
	worstCase?: { lower: (number | null)[]; upper: (number | null)[] };
	/** Value at the present point, as it is read. */
	presentText: string;
	present: number | null;
}

/** A requirement along a sweep. */
export interface SweepLimit {
	/** The requirement's own place. */
	cell: string;
	line: number;
	/** Name of the series that it limits. */
	name: string;
	/** At each point, or one number where it is the same at all of them; null where there is none on that side. */
	lower: (number | null)[] | null;
	upper: (number | null)[] | null;
	/** At the present point, as they are read. */
	lowerText: string | null;
	upperText: string | null;
	/** Neighbouring parts of the range with one verdict each, null where there is none. `text` says from where to where. */
	stretches: { from: number; to: number; verdict: Verdict | null; text: string }[];
	/** Where the value itself passes a limit, whatever its doubt. */
	crossings: { x: number; limit: 'lower' | 'upper'; text: string }[];
	/** The stretches as a sentence without a full stop. */
	text: string;
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
	/** Columns that the replacement takes the place of, where they are not `from`–`to`. */
	replaces?: { from: number; to: number };
	/** Quantity that wants another name wherever it is used, and that name. */
	rename?: { from: string; to: string };
}

/** Everything the sheet, the API, freezing and print show of a note. Numbers are unrounded. */
export interface Evaluation {
	engine: string;
	quantities: Record<string, Quantity>;
	lines: WorkedLine[];
	requirements: Requirement[];
	figures: Figure[];
	/** By the name of the curve; absent where the note has none. */
	curves?: Record<string, Curve>;
	/** In sheet order; absent where the note has none. */
	sweeps?: Sweep[];
	errors: Fault[];
}
