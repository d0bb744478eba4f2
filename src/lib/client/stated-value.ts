/** A formula that states one value: the value as it is typed, and what the formula says around it. */
export interface StatedValue {
	/** `tolerance(`, '' for a bare value. */
	before: string;
	number: number;
	/** As typed, '' for a pure number. */
	unit: string;
	/** `, 1 %)` */
	behind: string;
}

const value =
	/^([-+]?(?:\d+\.?\d*|\.\d+)(?:[eE][-+]?\d+)?)\s*((?:[\p{L}µ°%Ω][\p{L}µ°%Ω\d^*/·]*)?)$/u;
/** Functions that state how a quantity deviates from their first value. */
const doubt =
	/^(\s*(?:normal|rectangular|tolerance|triangular|arcsine|trapezoidal|inexactRectangular|student)\(\s*)([^,()]+?)(\s*,.*\)\s*)$/;

/** Reads `100 kohm` and `tolerance(100 kohm, 1 %)`; undefined for a formula that computes. */
export function readStated(formula: string): StatedValue | undefined {
	const [, before = '', centre = formula.trim(), behind = ''] = doubt.exec(formula) ?? [];
	const match = value.exec(centre);
	if (!match) return undefined;
	return { before, number: Number(match[1]), unit: match[2] ?? '', behind };
}

/** The formula with another value in it; what it says around the value stays. */
export function withValue({ before, behind }: StatedValue, text: string): string {
	return before + text + behind;
}

/** A number with its unit as it is typed. */
export function typedValue(number: number, unit: string): string {
	return unit === '' ? String(number) : `${number} ${unit}`;
}

/**
 * The formula that somebody means who types into a trial: a bare number takes the unit that was there, a value keeps what
 * the formula says around it, and anything else is a formula of its own.
 */
export function meantBy(typed: string, present: StatedValue | undefined): string {
	const text = typed.trim();
	const stated = readStated(text);
	if (!present || !stated || stated.before !== '') return text;
	const { unit } = stated.unit === '' ? present : stated;
	return withValue(present, typedValue(stated.number, unit));
}
