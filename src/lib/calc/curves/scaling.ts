import { column, fromNumbers, put, at, type Column } from './columns';
import { exactSum, one, over, plus, times, wide, zero, type Wide } from './double-double';

/** x counted from the middle of its range, in half ranges: u = (x − centre) / halfRange lies within −1 to 1. */
export interface Scaling {
	centre: number;
	halfRange: number;
}

/** Smallest and largest member. */
export function rangeOf(x: readonly number[]): { lower: number; upper: number } {
	let lower = Infinity;
	let upper = -Infinity;
	for (const value of x) {
		lower = Math.min(lower, value);
		upper = Math.max(upper, value);
	}
	return { lower, upper };
}

/** Centre and half range of a column; without an intercept zero stays zero. */
export function scalingOf(x: readonly number[], intercept: boolean): Scaling {
	const { lower, upper } = rangeOf(x);
	const centre = intercept ? lower / 2 + upper / 2 : 0;
	const halfRange = intercept ? upper / 2 - lower / 2 : Math.max(Math.abs(lower), Math.abs(upper));
	return { centre, halfRange: halfRange || 1 };
}

/** Scaled x, to double's own precision. */
export function scaled({ centre, halfRange }: Scaling, x: number): number {
	return (x - centre) / halfRange;
}

/** Columns u^from … u^degree, each member times its row's weight. */
export function powersOf(
	x: readonly number[],
	{ centre, halfRange }: Scaling,
	powers: { from: number; degree: number },
	weights: Column | undefined,
): Column[] {
	const u = column(x.length);
	for (const [i, value] of x.entries()) put(u, i, over(exactSum(value, -centre), wide(halfRange)));
	const columns: Column[] = [];
	let last = weights ?? fromNumbers(new Array<number>(x.length).fill(1));
	for (let power = 0; power <= powers.degree; power++) {
		if (power > 0) last = product(last, u);
		if (power >= powers.from) columns.push(last);
	}
	return columns;
}

/** Members of two columns multiplied pair by pair. */
export function product(a: Column, b: Column): Column {
	const result = column(a.hi.length);
	for (let i = 0; i < a.hi.length; i++) put(result, i, times(at(a, i), at(b, i)));
	return result;
}

/**
 * What turns coefficients of powers of u into those of powers of x: row j, column k is the coefficient of x^j in
 * u^k.
 */
export function toOriginal({ centre, halfRange }: Scaling, degree: number): Wide[][] {
	const slope = over(one, wide(halfRange));
	const shift = over(wide(-centre), wide(halfRange));
	const rows = Array.from({ length: degree + 1 }, () => new Array<Wide>(degree + 1).fill(zero));
	rows[0]![0] = one;
	for (let k = 1; k <= degree; k++)
		for (let j = 0; j <= k; j++) {
			const kept = times(shift, rows[j]![k - 1]!);
			rows[j]![k] = j === 0 ? kept : plus(kept, times(slope, rows[j - 1]![k - 1]!));
		}
	return rows;
}

/** A power of two near the largest magnitude, so that dividing by it rounds nothing and squares stay in range. */
export function powerOfTwo(values: readonly number[]): number {
	let largest = 0;
	for (const value of values) largest = Math.max(largest, Math.abs(value));
	if (largest === 0) return 1;
	return 2 ** Math.max(-1_000, Math.min(1_000, Math.floor(Math.log2(largest))));
}

/** Readings divided by a power of two, times their weights. */
export function scaledReadings(
	y: readonly number[],
	unit: number,
	weights: Column | undefined,
): Column {
	const plain = fromNumbers(y.map((value) => value / unit));
	return weights ? product(plain, weights) : plain;
}

/** Weights least ÷ uncertainty of each row, and that least uncertainty. */
export function weightsOf(uncertainties: readonly number[]): { weights: Column; least: number } {
	const least = rangeOf(uncertainties).lower;
	const weights = column(uncertainties.length);
	for (const [i, value] of uncertainties.entries()) put(weights, i, over(wide(least), wide(value)));
	return { weights, least };
}
