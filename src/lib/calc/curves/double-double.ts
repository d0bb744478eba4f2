/**
 * A number of about 32 decimal digits: the unrounded sum of two doubles, `lo` below half a unit in the last place of
 * `hi` (Dekker, Numerische Mathematik 18, 1971, pages 224 to 242).
 */
export interface Wide {
	readonly hi: number;
	readonly lo: number;
}

/** Splits a double into two halves of 26 bits, whose products are exact. */
export const splitter = 134_217_729;

export const zero: Wide = { hi: 0, lo: 0 };
export const one: Wide = { hi: 1, lo: 0 };

export function wide(value: number): Wide {
	return { hi: value, lo: 0 };
}

export function narrow(value: Wide): number {
	return value.hi + value.lo;
}

/** The exact sum of two doubles. */
export function exactSum(a: number, b: number): Wide {
	const hi = a + b;
	const part = hi - a;
	return { hi, lo: a - (hi - part) + (b - part) };
}

/** The exact product of two doubles, where neither it nor the halves overflow. */
export function exactProduct(a: number, b: number): Wide {
	const hi = a * b;
	const aUp = splitter * a;
	const aTop = aUp - (aUp - a);
	const aRest = a - aTop;
	const bUp = splitter * b;
	const bTop = bUp - (bUp - b);
	const bRest = b - bTop;
	return { hi, lo: aTop * bTop - hi + aTop * bRest + aRest * bTop + aRest * bRest };
}

function settled(hi: number, lo: number): Wide {
	const sum = hi + lo;
	return { hi: sum, lo: lo - (sum - hi) };
}

export function negative(a: Wide): Wide {
	return { hi: -a.hi, lo: -a.lo };
}

export function plus(a: Wide, b: Wide): Wide {
	const top = exactSum(a.hi, b.hi);
	const rest = exactSum(a.lo, b.lo);
	const middle = settled(top.hi, top.lo + rest.hi);
	return settled(middle.hi, middle.lo + rest.lo);
}

export function minus(a: Wide, b: Wide): Wide {
	return plus(a, negative(b));
}

export function times(a: Wide, b: Wide): Wide {
	const top = exactProduct(a.hi, b.hi);
	return settled(top.hi, top.lo + (a.hi * b.lo + a.lo * b.hi));
}

export function over(a: Wide, b: Wide): Wide {
	const first = a.hi / b.hi;
	const rest = minus(a, times(b, wide(first)));
	const second = rest.hi / b.hi;
	const last = minus(rest, times(b, wide(second))).hi / b.hi;
	return plus(settled(first, second), wide(last));
}

export function squareRoot(a: Wide): Wide {
	if (a.hi <= 0) return zero;
	const root = Math.sqrt(a.hi);
	const rest = minus(a, exactProduct(root, root));
	return settled(root, rest.hi / (2 * root));
}
