import type { Row } from '$lib/proof/proof';

const raised: Readonly<Record<string, string>> = Object.fromEntries(
	[...'0123456789-'].map((digit, i) => [digit, '⁰¹²³⁴⁵⁶⁷⁸⁹⁻'[i] ?? '']),
);

/** Printed digits with a true minus sign and a power of ten that is set as one. */
export function printed(figure: string): string {
	const [digits = '', exponent] = figure.toLowerCase().split('e');
	const number = digits.replace('-', '−');
	if (exponent === undefined || !/^[+-]?\d+$/.test(exponent) || digits === '')
		return figure.replace(/^-(?=[\d.])/, '−');
	const power = [...String(Number(exponent))].map((digit) => raised[digit]).join('');
	return `${number} × 10${power}`;
}

/** The computed figure, three digits longer than print. */
export function computedText({ computed, published }: Row): string {
	if (typeof computed === 'string') return computed;
	const digits = published === null ? 12 : Math.min(15, significant(published) + 3);
	return printed(shortest(computed, digits));
}

/** How far the computed figure is off, to two digits. */
export function differenceText({ difference }: Row): string {
	if (difference === undefined) return '';
	return difference === 0 ? '0' : printed(shortest(difference, 2));
}

/** The unit as the sheet writes it. */
export function unitText(unit: string): string {
	if (unit === '1') return '';
	return unit
		.replace('ohm', 'Ω')
		.replace('deg', '°')
		.replace(/^u(?=[A-Za-z])/, 'µ')
		.replace(/(?:\^|(?<=mm))2/, '²')
		.replace(/\^3/, '³');
}

function significant(figure: string): number {
	const [digits = ''] = figure.toLowerCase().split('e');
	return Math.max(3, digits.replace(/[^\d]/g, '').replace(/^0+/, '').length);
}

/** So many digits without the zeros that say nothing. */
function shortest(value: number, digits: number): string {
	return String(Number(value.toPrecision(digits)));
}
