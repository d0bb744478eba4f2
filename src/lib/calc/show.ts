import { bounds } from './bounds';
import type { Quantity, Readout } from './results';
import type { Type } from './types';
import { none } from './units/dimension';
import { coherentUnit } from './units/coherent';
import { compose, digitsReadout, doubtfulReadout, readout } from './units/display';
import { formatNumber } from './units/number-text';
import { fromSI, type Unit } from './units/unit';
import { isGrid, type Value } from './values';

/** Unit a value is given in: the chosen one, or the coherent one of its dimension. */
export function unitOf(type: Type): Unit {
	return type.unit ?? coherentUnit(type.dimension ?? none);
}

/**
 * The readout of a value, with its expanded uncertainty where it has one. Exact values have six significant digits where
 * nobody chose how many.
 */
export function show(value: Value, type: Type, expanded?: number, digits?: number): Readout {
	if (typeof value === 'boolean') return compose(value ? 'true' : 'false', '');
	if (typeof value === 'string') return compose(value, '');
	const unit = unitOf(type);
	if (!isGrid(value)) {
		if (expanded !== undefined) return doubtfulReadout(value, expanded, unit, !type.fixed, digits);
		return digits === undefined
			? readout(value, unit, !type.fixed)
			: digitsReadout(value, unit, !type.fixed, digits);
	}
	return showGrid(value.data, value.shape, unit, !type.fixed);
}

const listed = 6;

function showGrid(
	data: Float64Array,
	shape: readonly number[],
	unit: Unit,
	engineering: boolean,
): Readout {
	if (shape.length > 1) return compose(`${shape.join(' × ')} values`, unit.label);
	const largest = data.reduce((most, x) => Math.max(most, Math.abs(x)), 0);
	const model = readout(largest, unit, engineering);
	const ratio = largest === 0 ? 1 : scaleOf(largest, unit, engineering);
	const shown = [...data.slice(0, listed)].map((x) =>
		formatNumber(Number((fromSI(x, unit) * ratio).toPrecision(12))),
	);
	const more = data.length > listed ? [`… (${data.length})`] : [];
	return compose(`[${[...shown, ...more].join(', ')}]`, model.unit);
}

/** Factor between the unit and the one with the prefix that the largest member has. */
function scaleOf(largest: number, unit: Unit, engineering: boolean): number {
	if (!engineering) return 1;
	for (const decade of [-15, -12, -9, -6, -3, 0, 3, 6, 9, 12]) {
		const scaled = readout(10 ** decade, unit, true);
		if (scaled.unit === readout(largest, unit, true).unit && scaled.number === '1')
			return 10 ** -decade;
	}
	return 1;
}

/** The figures of a quantity, unrounded, in its unit. */
export function figures(
	value: Value,
	type: Type,
): Pick<Quantity, 'unit' | 'value' | 'shape' | 'values'> {
	if (typeof value === 'boolean' || typeof value === 'string') return { unit: '1', value: null };
	const unit = unitOf(type);
	if (!isGrid(value)) return { unit: unit.text, value: fromSI(value, unit) };
	const shape = [...value.shape];
	if (value.data.length > bounds.listedMembers) return { unit: unit.text, value: null, shape };
	return {
		unit: unit.text,
		value: null,
		shape,
		values: [...value.data].map((x) => fromSI(x, unit)),
	};
}
