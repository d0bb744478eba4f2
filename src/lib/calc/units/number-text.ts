export const noBreak = '\u00a0';
/** Narrow no-break space: groups of three digits, as SP 811 asks for where more than four stand on a side. */
const thin = '\u202f';
export const minus = '\u2212';

/**
 * A number to `digits` significant digits, trailing zeros dropped, whole numbers below 10⁹ in full, powers of ten
 * outside 10⁻⁴ to 10⁷.
 */
export function formatNumber(value: number, digits = 6): string {
	if (Object.is(value, -0)) return '0';
	if (Number.isInteger(value) && Math.abs(value) < 1e9)
		return signed(value, group(String(Math.abs(value))));
	const rounded = Number(value.toPrecision(digits));
	const size = Math.abs(rounded);
	if (size < 1e-4 || size >= 1e7) {
		const [mantissa = '', exponent = ''] = size.toExponential(digits - 1).split('e');
		const short = group(trim(mantissa));
		return signed(value, `${short}${noBreak}×${noBreak}10${superscript(Number(exponent))}`);
	}
	return signed(value, group(plain(size, digits)));
}

/** A number to exactly so many significant digits, zeros at the end kept. */
export function formatDigits(value: number, digits: number): string {
	const size = Math.abs(Number(value.toPrecision(digits)));
	if (size !== 0 && (size < 1e-4 || size >= 1e9)) {
		const [mantissa = '', exponent = ''] = size.toExponential(digits - 1).split('e');
		return signed(
			value,
			`${group(mantissa)}${noBreak}×${noBreak}10${superscript(Number(exponent))}`,
		);
	}
	const before = size === 0 ? 0 : Math.floor(Math.log10(size));
	const text = group(size.toFixed(Math.min(100, Math.max(0, digits - 1 - before))));
	return size === 0 ? text : signed(value, text);
}

/** Decimal digits without an exponent. */
function plain(size: number, digits: number): string {
	const places = Math.max(0, digits - 1 - Math.floor(Math.log10(size)));
	return trim(size.toFixed(Math.min(places, 20)));
}

function trim(text: string): string {
	return text.includes('.') ? text.replace(/\.?0+$/, '') : text;
}

function signed(value: number, text: string): string {
	return value < 0 ? minus + text : text;
}

/** Decimal digits in groups of three. */
export function group(text: string): string {
	const [whole = '', fraction] = text.split('.');
	const left = whole.length > 4 ? whole.replace(/\B(?=(\d{3})+$)/g, thin) : whole;
	if (fraction === undefined) return left;
	const right = fraction.length > 4 ? fraction.replace(/(\d{3})(?=\d)/g, `$1${thin}`) : fraction;
	return `${left}.${right}`;
}

/** An exponent in raised digits. */
export function superscript(exponent: number): string {
	const digits = [...String(Math.abs(exponent))].map((digit) => '⁰¹²³⁴⁵⁶⁷⁸⁹'[Number(digit)]);
	return (exponent < 0 ? '⁻' : '') + digits.join('');
}
