import { isNone, none, over, raised, times, type Dimension } from './dimension';
import type { UnitSymbol } from './table';

interface Part {
	readonly symbol: UnitSymbol;
	readonly power: number;
}

/** A unit as it is typed and printed: a product of symbols with powers. */
export interface Unit {
	readonly parts: readonly Part[];
	readonly dimension: Dimension;
	readonly factor: number;
	readonly decade: number;
	/** Not 0 for a temperature whose scale has a zero of its own. */
	readonly offset: number;
	/** `mV/degC`, parses back to the same unit; '1' without parts. */
	readonly text: string;
	/** `mV/°C`; '' without parts. */
	readonly label: string;
}

/** The unit of pure numbers. */
export const one: Unit = {
	parts: [],
	dimension: none,
	factor: 1,
	decade: 0,
	offset: 0,
	text: '1',
	label: '',
};

const single = new WeakMap<UnitSymbol, Unit>();

export function fromSymbol(symbol: UnitSymbol): Unit {
	let unit = single.get(symbol);
	if (!unit) {
		unit = { ...product([{ symbol, power: 1 }]), offset: symbol.offset };
		single.set(symbol, unit);
	}
	return unit;
}

/** Product of powers. A temperature scale loses its zero in it: `mV/degC` counts degrees. */
export function product(parts: readonly Part[]): Unit {
	const merged = new Map<UnitSymbol, number>();
	for (const { symbol, power } of parts) merged.set(symbol, (merged.get(symbol) ?? 0) + power);
	const kept = [...merged].filter(([, power]) => power !== 0);
	let [factor, decade, dimension] = [1, 0, none];
	for (const [symbol, power] of kept) {
		factor *= symbol.factor ** power;
		decade += symbol.decade * power;
		dimension =
			power > 0
				? times(dimension, raised(symbol.dimension, power))
				: over(dimension, raised(symbol.dimension, -power));
	}
	if (!Number.isInteger(decade)) {
		factor *= 10 ** decade;
		decade = 0;
	}
	const list = kept.map(([symbol, power]) => ({ symbol, power }));
	return { parts: list, dimension, factor, decade, offset: 0, ...spell(list) };
}

export function multiplied(a: Unit, b: Unit): Unit {
	return product([...a.parts, ...b.parts]);
}

export function divided(a: Unit, b: Unit): Unit {
	return multiplied(a, power(b, -1));
}

export function power(unit: Unit, exponent: number): Unit {
	return product(unit.parts.map((part) => ({ ...part, power: part.power * exponent })));
}

/** Number in `unit` → number in SI units. */
export function toSI(value: number, unit: Unit): number {
	return scale(value * unit.factor, unit.decade) + unit.offset;
}

/** Number in SI units → number in `unit`. */
export function fromSI(value: number, unit: Unit): number {
	return scale(value - unit.offset, -unit.decade) / unit.factor;
}

/** Difference in SI units → difference in `unit`: no scale's zero counts. */
export function differenceFromSI(value: number, unit: Unit): number {
	return scale(value, -unit.decade) / unit.factor;
}

export function isPure(unit: Unit): boolean {
	return isNone(unit.dimension);
}

function scale(value: number, decade: number): number {
	return decade < 0 ? value / 10 ** -decade : value * 10 ** decade;
}

function spell(parts: readonly Part[]): { text: string; label: string } {
	const above = parts.filter((part) => part.power > 0);
	const below = parts.filter((part) => part.power < 0);
	const text = join(above.map(plainPower), below.map(plainPower), '*');
	// 1/s alone is printed as s⁻¹, so that no figure runs into the 1.
	const label =
		above.length > 0
			? join(
					above.map((part) => printedPower(part)),
					below.map((part) => printedPower(part)),
					'·',
				)
			: below.map((part) => printedPower(part, '⁻')).join('·');
	return { text: text || '1', label };
}

function join(above: string[], below: string[], sign: string): string {
	if (below.length === 0) return above.join(sign);
	const top = above.length === 0 ? '1' : above.join(sign);
	const foot = below.length === 1 ? below.join('') : `(${below.join(sign)})`;
	return `${top}/${foot}`;
}

function plainPower({ symbol, power: p }: Part): string {
	const size = Math.abs(p);
	if (size === 1) return symbol.text;
	if (size === 0.5) return `sqrt(${symbol.text})`;
	return Number.isInteger(size) ? `${symbol.text}^${size}` : `${symbol.text}^(${size})`;
}

const raisedDigits = '⁰¹²³⁴⁵⁶⁷⁸⁹';

function printedPower({ symbol, power: p }: Part, sign = ''): string {
	const size = Math.abs(p);
	const mark = sign === '⁻' ? '⁻' : '';
	if (size === 1) return symbol.label + (mark && '⁻¹');
	if (size === 0.5) return mark ? `1/√${symbol.label}` : `√${symbol.label}`;
	if (!Number.isInteger(size)) return `${symbol.label}^${mark && '−'}${size}`;
	const digits = [...String(size)].map((digit) => raisedDigits[Number(digit)]).join('');
	return symbol.label + mark + digits;
}
