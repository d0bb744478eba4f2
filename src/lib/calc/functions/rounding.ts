import { plainValue } from './plain-value';
import { Trouble } from '../trouble';
import type { Node, TapeBuilder } from '../doubt/tape';
import { mapNodes, type Traced } from '../traced';
import { differ, isPure, pure, spoken, type Type } from '../types';
import { map, type Value } from '../values';
import { expectNumber, expectPure, Refusal, refusePoint, scalar, type Argument } from './function';

/** Type of `round(x, n, unit)` and its like. A value with a unit says in which unit it is rounded. */
export function roundingType([x, digits, unit]: Argument[]): Type {
	if (!x) return pure;
	expectNumber(x, 'Rounds');
	refusePoint(x, 'Rounds');
	if (digits) expectPure(digits, 'The number of decimals');
	if (unit && !unit.unit) throw new Trouble('syntax', unit, 'The third value is a unit.');
	const name = spoken(x.type);
	if (!unit && x.type.dimension && !isPure(x.type))
		throw new Trouble('dimension', x, `Rounds ${name} without a unit to round in.`, {
			mend: `Write \`round(x, 2, ${x.type.unit?.text ?? name})\`, say.`,
		});
	if (unit && differ(x.type, unit.type))
		throw new Trouble('dimension', unit, `Rounds ${name} in ${unit.unit?.label ?? ''}.`);
	return x.type;
}

/** Puts the rounding of each number on a tape. Throws Refusal. */
export function roundedNodes(
	tape: TapeBuilder,
	[x, digits, unit]: Traced[],
	fn: (node: Node) => Node,
): Traced {
	const places = digits ? Number(plainValue(digits, 'The number of decimals')) : 0;
	const size = unit ? Number(plainValue(unit, 'The unit')) : 1;
	const step = tape.constant(size / 10 ** places);
	return mapNodes(tape, x!, (node) => tape.binary('mul', fn(tape.binary('div', node, step)), step));
}

/** Rounds each number to `digits` decimals of the unit's size. Throws Refusal. */
export function rounded([x = 0, digits, unit]: Value[], fn: (x: number) => number): Value {
	const places = digits === undefined ? 0 : scalar(digits, 'The number of decimals');
	if (!Number.isInteger(places) || places < 0 || places > 15)
		throw new Refusal('The number of decimals is a whole number from 0 to 15.');
	const size = unit === undefined ? 1 : Number(unit);
	return map(x, (number) => {
		// Fourteen digits first, so that 2.675 counts as such and not as 2.674 999 …
		const scaled = Number(((number / size) * 10 ** places).toPrecision(14));
		return (fn(scaled) / 10 ** places) * size;
	});
}
