import { formatNumber, minus, noBreak } from '$lib/calc/units/number-text';
import { coherentUnit } from '$lib/calc/units/coherent';
import { same as sameDimension } from '$lib/calc/units/dimension';
import { readout } from '$lib/calc/units/display';
import { one, toSI, type Unit } from '$lib/calc/units/unit';
import { parseUnit } from '$lib/calc/language/parse-line';
import type { Delta } from '$lib/schemas/comparison';

/** Figures that differ by no more than this share of the larger one count as the same: what rounding leaves. */
export const tolerance = 1e-9;

/** A number with the text of its unit, `mV`, and as it is shown. */
export interface Amount {
	value: number;
	unit: string;
	shown: string;
	/** Whether it is a difference, for which a scale's zero does not count. */
	interval: boolean;
}

/** How one amount became another; undefined where they are the same. Units are reconciled: 5 mV is 0.005 V. */
export function deltaOf(from: Amount | null, to: Amount | null): Delta | undefined {
	if (!from || !to) {
		if (!from && !to) return undefined;
		return { from: from?.shown ?? null, to: to?.shown ?? null, difference: null, relative: null };
	}
	const shown = { from: from.shown, to: to.shown };
	const alike = reconciled(from, to);
	if (!alike) return { ...shown, difference: null, relative: null };
	const { a, b, unit, hasZero } = alike;
	if (isSame(a, b)) return undefined;
	const share = (b - a) / Math.abs(a);
	return {
		...shown,
		difference: { value: b - a, unit: intervalUnit(unit).text, text: differenceText(b - a, unit) },
		relative:
			hasZero || !Number.isFinite(share) ? null : { value: share, text: percentText(share) },
	};
}

export function isSame(a: number, b: number): boolean {
	return a === b || Math.abs(a - b) <= tolerance * Math.max(Math.abs(a), Math.abs(b));
}

/** Both numbers in the unit of the second; undefined where they are of different kinds. */
function reconciled(from: Amount, to: Amount) {
	const unit = unitOf(to.unit);
	const other = from.unit === to.unit ? unit : unitOf(from.unit);
	if (!sameDimension(other.dimension, unit.dimension)) return undefined;
	const a = other === unit ? from.value : inUnit(from, other, unit);
	const hasZero = !from.interval && (unit.offset !== 0 || other.offset !== 0);
	return { a, b: to.value, unit, hasZero };
}

function inUnit({ value, interval }: Amount, from: Unit, to: Unit): number {
	const offset = interval ? 0 : from.offset - to.offset;
	const scaled = (value * from.factor * 10 ** (from.decade - to.decade)) / to.factor;
	return scaled + offset / (to.factor * 10 ** to.decade);
}

function unitOf(text: string): Unit {
	return text === '1' ? one : parseUnit(text);
}

/** The unit of a difference: kelvin between degrees Celsius. */
function intervalUnit(unit: Unit): Unit {
	return unit.offset === 0 ? unit : coherentUnit(unit.dimension);
}

function differenceText(difference: number, unit: Unit): string {
	const plain = { ...unit, offset: 0 };
	const { text } = readout(toSI(Math.abs(difference), plain), intervalUnit(unit), true, 4);
	return (difference < 0 ? minus : '+') + text;
}

function percentText(share: number): string {
	const percent = formatNumber(Number((100 * Math.abs(share)).toPrecision(3)), 3);
	return `${share < 0 ? minus : '+'}${percent}${noBreak}%`;
}
