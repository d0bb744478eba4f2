/** An interval of values, and the numbers that two of them have in common. */
export type Interval = [lower: number, upper: number];

/** How many of m sorted values lie in a coverage interval (JCGM 101:2008, 7.7.1). */
function inside(coverage: number, m: number): number {
	return Math.min(m - 1, Math.floor(coverage * m + 0.5));
}

/** Probabilistically symmetric coverage interval of sorted values (JCGM 101:2008, 7.7.2). */
export function symmetricInterval(sorted: Float64Array, coverage: number): Interval {
	const m = sorted.length;
	const q = inside(coverage, m);
	const rest = m - q;
	const r = Math.max(1, rest % 2 === 0 ? rest / 2 : Math.floor((rest + 1) / 2));
	return [sorted[r - 1]!, sorted[Math.min(m, r + q) - 1]!];
}

/** Shortest coverage interval of sorted values (JCGM 101:2008, 7.7.3). */
export function shortestInterval(sorted: Float64Array, coverage: number): Interval {
	const q = inside(coverage, sorted.length);
	let best = 0;
	for (let r = 1; r + q < sorted.length; r++)
		if (sorted[r + q]! - sorted[r]! < sorted[best + q]! - sorted[best]!) best = r;
	return [sorted[best]!, sorted[best + q]!];
}

/** Mean and standard deviation (JCGM 101:2008, 7.6), in two passes. */
export function moments(values: Float64Array): { mean: number; standardUncertainty: number } {
	let sum = 0;
	for (let i = 0; i < values.length; i++) sum += values[i]!;
	const mean = sum / values.length;
	let squares = 0;
	for (let i = 0; i < values.length; i++) squares += (values[i]! - mean) ** 2;
	return { mean, standardUncertainty: Math.sqrt(squares / (values.length - 1)) };
}

/** Numerical tolerance of a standard uncertainty given to so many significant digits (JCGM 101:2008, 7.9.2). */
export function tolerance(uncertainty: number, digits = 2): number {
	if (!(uncertainty > 0) || !Number.isFinite(uncertainty)) return 0;
	const exponent = Number(uncertainty.toExponential(digits - 1).split('e')[1]);
	return 0.5 * 10 ** (exponent - digits + 1);
}

export interface Histogram {
	from: number;
	to: number;
	counts: number[];
	/** Values outside, of distributions with long tails. */
	below: number;
	above: number;
}

/** Counts sorted values in bins of equal width over all but the outermost two thousandths of them. */
export function histogram(sorted: Float64Array, bins = 100): Histogram {
	const m = sorted.length;
	const cut = Math.floor(m / 1_000);
	const [from, to] = [sorted[cut]!, sorted[m - 1 - cut]!];
	const counts = new Array<number>(bins).fill(0);
	let [below, above] = [0, 0];
	for (let i = 0; i < m; i++) {
		const value = sorted[i]!;
		if (value < from) below++;
		else if (value > to) above++;
		else
			counts[
				to > from ? Math.min(bins - 1, Math.floor(((value - from) / (to - from)) * bins)) : 0
			]!++;
	}
	return { from, to, counts, below, above };
}
