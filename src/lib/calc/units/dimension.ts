/** Exponents of kg, m, s, A, K, cd, mol and bit. Equal dimensions are the same object. */
export interface Dimension {
	readonly key: string;
	readonly powers: readonly number[];
}

const known = new Map<string, Dimension>();

/** The dimension with these exponents; small rounding left by roots is removed. */
export function dimension(powers: readonly number[]): Dimension {
	const exact = powers.map(cleaned);
	const key = exact.join(' ');
	let found = known.get(key);
	if (!found) {
		found = { key, powers: exact };
		// Powers that people invent must not fill the memory of a process that lives long.
		if (known.size > 5_000) known.clear();
		known.set(key, found);
	}
	return found;
}

/** A fraction of small numbers without the rounding that roots leave; any other power stays as it is. */
function cleaned(power: number): number {
	const fraction = Math.round(power * 5040) / 5040;
	return (Math.abs(fraction - power) < 1e-9 ? fraction : power) + 0;
}

const size = 8;

/** Dimension of a pure number. */
export const none = dimension(Array.from({ length: size }, () => 0));

export function same(a: Dimension, b: Dimension): boolean {
	return a === b || a.key === b.key;
}

export function isNone(a: Dimension): boolean {
	return a === none || a.key === none.key;
}

export function times(a: Dimension, b: Dimension): Dimension {
	if (isNone(b)) return a;
	if (isNone(a)) return b;
	return dimension(a.powers.map((power, i) => power + (b.powers[i] ?? 0)));
}

export function over(a: Dimension, b: Dimension): Dimension {
	if (isNone(b)) return a;
	return dimension(a.powers.map((power, i) => power - (b.powers[i] ?? 0)));
}

export function raised(a: Dimension, exponent: number): Dimension {
	return isNone(a) ? a : dimension(a.powers.map((power) => power * exponent));
}
