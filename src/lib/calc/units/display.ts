import { rounded } from '../doubt/display';
import type { AxisUnit, Readout } from '../results';
import type { Unit } from './unit';
import { differenceFromSI, fromSI } from './unit';
import { formatDigits, formatNumber, group, minus, noBreak, superscript } from './number-text';
import { findSymbol } from './table';

/** Prefixes that a readout may choose, by unit; others are shown without a prefix. */
const shown: Readonly<Record<string, readonly string[]>> = {
	V: ['p', 'n', 'u', 'm', '', 'k', 'M'],
	A: ['f', 'p', 'n', 'u', 'm', '', 'k'],
	ohm: ['u', 'm', '', 'k', 'M', 'G', 'T'],
	W: ['p', 'n', 'u', 'm', '', 'k', 'M', 'G'],
	F: ['f', 'p', 'n', 'u', 'm', ''],
	H: ['p', 'n', 'u', 'm', ''],
	S: ['p', 'n', 'u', 'm', '', 'k'],
	C: ['f', 'p', 'n', 'u', 'm', ''],
	J: ['n', 'u', 'm', '', 'k', 'M'],
	N: ['u', 'm', '', 'k', 'M'],
	Pa: ['u', 'm', '', 'k', 'M', 'G'],
	Hz: ['u', 'm', '', 'k', 'M', 'G', 'T'],
	T: ['n', 'u', 'm', ''],
	Wb: ['n', 'u', 'm', ''],
	VA: ['m', '', 'k', 'M'],
	K: ['u', 'm', ''],
	s: ['p', 'n', 'u', 'm', ''],
	m: ['p', 'n', 'u', 'm', '', 'k'],
	g: ['n', 'u', 'm', '', 'k'],
	mol: ['u', 'm', '', 'k'],
};

/** Prefixes that readouts of a unit use; undefined where it takes none. */
export function prefixesOf(base: string): readonly string[] | undefined {
	return Object.hasOwn(shown, base) ? shown[base] : undefined;
}

/** A unit with another prefix on its first symbol, where that is a plain one (`V/K`, not `V²`). */
function reprefixed(unit: Unit, prefix: string): { label: string; shift: number } | undefined {
	const first = unit.parts[0];
	if (!first || first.power !== 1) return undefined;
	const other = findSymbol(prefix + first.symbol.base);
	if (!other) return undefined;
	return {
		label: other.label + unit.label.slice(first.symbol.label.length),
		shift: first.symbol.decade - other.decade,
	};
}

/** Whether readouts of this unit may take an engineering prefix. */
export function takesPrefix(unit: Unit): boolean {
	const first = unit.parts[0];
	return first !== undefined && first.power === 1 && shown[first.symbol.base] !== undefined;
}

/** A value of SI units in `unit`; with `engineering` the prefix is chosen so that 1 to 999 stands before the mark. */
export function readout(si: number, unit: Unit, engineering: boolean, digits = 6): Readout {
	return exactReadout(si, unit, engineering, digits, formatNumber);
}

/** The same to exactly so many digits, zeros at the end kept. */
export function digitsReadout(
	si: number,
	unit: Unit,
	engineering: boolean,
	digits: number,
): Readout {
	return exactReadout(si, unit, engineering, digits, formatDigits);
}

function exactReadout(
	si: number,
	unit: Unit,
	engineering: boolean,
	digits: number,
	format: (value: number, digits: number) => string,
): Readout {
	const value = fromSI(si, unit);
	const chosen = engineering ? choose(value, unit, digits) : undefined;
	const number = format(chosen ? shifted(value, chosen.shift) : value, digits);
	return compose(number, chosen?.label ?? unit.label);
}

/**
 * A value of SI units with its expanded uncertainty, a difference: both to the same place and with one unit, the
 * uncertainty to two significant digits (JCGM 100:2008, 7.2.6), or the value to so many `digits` as somebody chose; of
 * the uncertainty one digit stays at least.
 */
export function doubtfulReadout(
	si: number,
	expanded: number,
	unit: Unit,
	engineering: boolean,
	digits?: number,
): Readout {
	const value = fromSI(si, unit);
	const doubt = differenceFromSI(expanded, unit);
	const leading = Math.max(Math.abs(value), doubt);
	const chosen = engineering ? choose(leading, unit, 6) : undefined;
	const shift = chosen?.shift ?? plainShift(leading);
	const power = chosen ? '' : powerOfTen(-shift);
	const [size, width] = [shifted(value, shift), shifted(doubt, shift)];
	const figures = rounded(size, width, 1, doubtDigits(size, width, digits));
	if (!figures) return readout(si, unit, engineering);
	const number = typeset(figures.value) + power;
	const plusMinus = typeset(figures.uncertainty) + power;
	const label = chosen?.label ?? unit.label;
	const behind = label === '' ? '' : noBreak + label;
	return {
		text: `${number}${behind} ±${noBreak}${plusMinus}${behind}`,
		number,
		unit: label,
		doubt: plusMinus,
	};
}

/** The unit that an axis is labelled in, with the prefix of its largest number, in SI units here. */
export function axisUnit(largest: number, unit: Unit, engineering: boolean): AxisUnit {
	const chosen = engineering ? choose(fromSI(largest, unit), unit, 6) : undefined;
	return { factor: 10 ** (chosen?.shift ?? 0), unit: chosen?.label ?? unit.label };
}

/** Significant digits of an uncertainty with which the value beside it has so many. */
function doubtDigits(value: number, doubt: number, digits: number | undefined): number {
	if (digits === undefined) return 2;
	if (value === 0 || !(doubt > 0)) return 2;
	const place = Math.floor(Math.log10(Math.abs(value))) - digits + 1;
	return Math.min(15, Math.max(1, Math.floor(Math.log10(doubt)) - place + 1));
}

/** Decade that a figure without a prefix is shifted by, so that no row of zeros is shown. */
function plainShift(size: number): number {
	if (size >= 1e-4 && size < 1e7) return 0;
	return -Math.floor(Math.log10(size));
}

function powerOfTen(decade: number): string {
	return decade === 0 ? '' : `${noBreak}×${noBreak}10${superscript(decade)}`;
}

/** Decimal digits in groups, with a minus sign. */
function typeset(digits: string): string {
	const bare = digits.replace(/^-/, '');
	return (bare === digits ? '' : minus) + group(bare);
}

/** Joins figure and unit. */
export function compose(number: string, unit: string): Readout {
	return { text: unit === '' ? number : number + noBreak + unit, number, unit };
}

function choose(value: number, unit: Unit, digits: number) {
	const prefixes = shown[unit.parts[0]?.symbol.base ?? ''];
	if (!prefixes || value === 0) return undefined;
	let best: { label: string; shift: number } | undefined;
	for (const prefix of prefixes) {
		const option = reprefixed(unit, prefix);
		if (!option) continue;
		const size = Math.abs(Number(shifted(value, option.shift).toPrecision(digits)));
		if (best === undefined && size < 1e-3) return undefined;
		if (size >= 1 || best === undefined) best = option;
	}
	return best;
}

function shifted(value: number, decade: number): number {
	return decade < 0 ? value / 10 ** -decade : value * 10 ** decade;
}
