import type { Readout } from './results';
import { typeset } from './symbol';
import { level, type Piece } from './tex-pieces';
import { formatNumber } from './units/number-text';
import type { Unit } from './units/unit';

const special: Readonly<Record<string, string>> = {
	'\\': '\\textbackslash{}',
	'^': '\\textasciicircum{}',
	'~': '\\textasciitilde{}',
};

/** Upright words, whatever characters are in them. */
export function words(text: string): string {
	return `\\text{${text.replace(/[\\{}$&#%_^~]/g, (c) => special[c] ?? `\\${c}`)}}`;
}

const raised = '⁰¹²³⁴⁵⁶⁷⁸⁹';

/** A unit as it is printed, upright. */
export function unitTex(label: string): string {
	const tex = label
		.replace(/⁻?[⁰¹²³⁴⁵⁶⁷⁸⁹]+/g, (digits) => `^{${plainDigits(digits)}}`)
		.replace(/\^(−?[\d.]+)/g, '^{$1}')
		.replace(/√(\p{L}+)/gu, '\\sqrt{$1}')
		.replaceAll('−', '-')
		.replaceAll('%', '\\%')
		.replaceAll('°', '{^\\circ}')
		.replaceAll('Ω', '\\Omega ')
		.replaceAll('µ', '\\text{µ}')
		.replaceAll('·', '{\\cdot}');
	return `\\mathrm{${tex}}`;
}

function plainDigits(text: string): string {
	return [...text].map((c) => (c === '⁻' ? '-' : String(raised.indexOf(c)))).join('');
}

/** A figure as it is shown, in TeX. */
function numberTex(shown: string): string {
	return shown
		.replaceAll('\u202f', '\\,')
		.replaceAll('\u2212', '-')
		.replace(/\u00a0?×\u00a0?10(⁻?[⁰¹²³⁴⁵⁶⁷⁸⁹]+)/g, (_, power: string) => {
			return ` \\times 10^{${plainDigits(power)}}`;
		});
}

function joined(number: string, unit: string): Piece {
	const tex = numberTex(number) + (unit === '' ? '' : `\\,${unitTex(unit)}`);
	if (number.startsWith('\u2212')) return { tex, level: level.sign };
	const single = unit === '' && !number.includes('×');
	return { tex, level: single ? level.atom : level.quantity };
}

const constants: ReadonlyMap<number, string> = new Map([
	[Math.PI, '\\pi '],
	[Math.E, '\\mathrm{e}'],
]);

/** A number as it was typed, with its unit. */
export function quantityTex(typed: number, unit: Unit | undefined): Piece {
	const constant = unit ? undefined : constants.get(typed);
	return constant === undefined
		? joined(formatNumber(typed, 12), unit?.label ?? '')
		: { tex: constant, level: level.atom };
}

/** The value of a readout with its unit; a value that is no number as words. */
export function readoutTex({ number, unit }: Readout): Piece {
	return /^[\u2212\d]/.test(number)
		? joined(number, unit)
		: { tex: words(unit === '' ? number : `${number} ${unit}`), level: level.atom };
}

/** A quantity's symbol with its subscript. */
export function symbolTex(name: string): string {
	const { base, glyph, sub } = typeset(name);
	const symbol = glyph === base ? plainSymbol(base) : greekTex(base, glyph);
	return sub === '' ? symbol : `${symbol}_{${words(sub)}}`;
}

function plainSymbol(base: string): string {
	if (/^[A-Za-z]$/.test(base)) return base;
	return /^[A-Za-z0-9]+$/.test(base) ? `\\mathit{${base}}` : base.length === 1 ? base : words(base);
}

function greekTex(base: string, glyph: string): string {
	return /^[A-Za-z]+$/.test(base) ? `\\${base} ` : glyph;
}
