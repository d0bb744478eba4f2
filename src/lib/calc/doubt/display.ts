/** A value and its uncertainty as they are written (JCGM 100:2008, 7.2.6): plain decimal digits, no exponent. */
export interface Rounded {
	value: string;
	uncertainty: string;
	/** Power of ten of the last digit of both. */
	place: number;
}

/**
 * Rounds an uncertainty to significant digits, two of them by default, and the value to the same place. Both are divided
 * by `factor`, the size of the shown unit in the coherent one. Undefined where there is no uncertainty to go by.
 */
export function rounded(
	value: number,
	uncertainty: number,
	factor = 1,
	digits = 2,
): Rounded | undefined {
	const u = uncertainty / factor;
	if (!(u > 0) || !Number.isFinite(u) || !Number.isFinite(value / factor)) return undefined;
	// toExponential carries: 9.96 becomes 1.0e+1, one place further up.
	const shown = u.toExponential(digits - 1);
	const place = Number(shown.split('e')[1]) - digits + 1;
	return {
		value: toPlace(value / factor, place),
		uncertainty: toPlace(Number(shown), place),
		place,
	};
}

/** A number to the nearest multiple of a power of ten. */
function toPlace(value: number, place: number): string {
	if (place < 0) return withoutMinusZero(value.toFixed(Math.min(100, -place)));
	const size = Math.abs(value);
	const digits = size > 0 ? Number(size.toExponential().split('e')[1]) - place : -2;
	// One digit too many in front costs nothing: it is the rounding place that counts.
	if (digits < 0)
		return size >= 0.5 * 10 ** place ? (value < 0 ? '-1' : '1') + '0'.repeat(place) : '0';
	const [mantissa = '', exponent] = value.toExponential(Math.min(100, digits)).split('e');
	const bare = mantissa.replace('.', '');
	const sign = bare.startsWith('-') ? 1 : 0;
	return bare + '0'.repeat(Math.max(0, Number(exponent) + 1 - (bare.length - sign)));
}

function withoutMinusZero(text: string): string {
	return /^-0(\.0*)?$/.test(text) ? text.slice(1) : text;
}
