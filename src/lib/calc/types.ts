import { isNone, none, same, type Dimension } from './units/dimension';
import { coherentUnit } from './units/coherent';
import type { Unit } from './units/unit';

/** What is known of an expression before it is computed. */
export interface Type {
	readonly kind: 'number' | 'boolean' | 'series' | 'text' | 'unknown';
	/** The characters of a text that was typed in quotes; absent for one that is computed. */
	readonly text?: string;
	/** Absent where it depends on something that is not known yet. */
	readonly dimension?: Dimension;
	/** A temperature on a scale with a zero of its own, not a difference. */
	readonly point?: boolean;
	/** Unit the readout keeps, because a person typed or chose it. */
	readonly unit?: Unit;
	/** The readout stays in exactly that unit, without another prefix. */
	readonly fixed?: boolean;
}

export const unknown: Type = { kind: 'unknown' };
export const truth: Type = { kind: 'boolean' };
export const pure: Type = { kind: 'number', dimension: none };

export function ofDimension(dimension: Dimension): Type {
	return { kind: 'number', dimension };
}

export function isPure(type: Type): boolean {
	return type.dimension !== undefined && isNone(type.dimension);
}

/** Whether both are known and differ. */
export function differ(a: Type, b: Type): boolean {
	return a.dimension !== undefined && b.dimension !== undefined && !same(a.dimension, b.dimension);
}

/** Whether it is a number, as far as is known. */
export function isNumeric(type: Type): boolean {
	return type.kind === 'number' || type.kind === 'unknown';
}

/** How a sentence calls a type: "V", "a pure number", "a temperature in °C". */
export function spoken(type: Type): string {
	if (type.kind === 'boolean') return 'a condition';
	if (type.kind === 'series') return 'a series';
	if (type.kind === 'text') return 'text in quotes';
	if (type.point) return `a temperature in ${type.unit?.label ?? '°C'}`;
	if (type.dimension === undefined) return 'an unknown unit';
	if (isNone(type.dimension)) return 'a pure number';
	return (type.unit ?? coherentUnit(type.dimension)).label;
}
