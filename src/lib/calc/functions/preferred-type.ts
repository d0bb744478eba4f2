import { Trouble } from '../trouble';
import { pure, spoken, type Type } from '../types';
import { isGrid, map, type Value } from '../values';
import { expectNumber, Refusal, refusePoint, type Argument } from './function';
import { member, series } from './series';

/** The type of `preferred(x, E24)` and its like: that of the value. */
export function preferredType(args: Argument[]): Type {
	const [x, which] = args;
	if (!x || !which) return pure;
	expectNumber(x, 'Preferred values are chosen for');
	refusePoint(x, 'Preferred values are chosen for');
	expectSeries(which, 'The second value');
	return x.type;
}

/** Throws Trouble unless a series is given. */
export function expectSeries(which: Argument, what: string): void {
	if (which.type.kind === 'series' || which.type.kind === 'unknown') return;
	throw new Trouble('value', which, `${what} is a series, not ${spoken(which.type)}.`, {
		mend: `Write one of ${[...series.keys()].join(', ')}.`,
	});
}

/** The neighbours of a number in a series: the largest value not above and the smallest not below it. */
function neighbours(x: number, name: string): [below: number, above: number] {
	const values = series.get(name) ?? [1];
	const exponent = Math.floor(Math.log10(x));
	const mantissa = x / 10 ** exponent;
	// The index found by mantissa may be one off by rounding; the exact members decide.
	let index = values.findIndex((value) => value > mantissa);
	if (index < 0) index = values.length;
	while (member(name, index, exponent) <= x * (1 + 1e-12)) index += 1;
	while (member(name, index - 1, exponent) > x * (1 + 1e-12)) index -= 1;
	const below = member(name, index - 1, exponent);
	// A value that was computed, 27 kΩ as 27 000.000 000 1 Ω, counts as the preferred value itself.
	if (Math.abs(below - x) <= x * 1e-12) return [below, below];
	return [below, member(name, index, exponent)];
}

/** Chooses between the neighbours of each number. Throws Refusal for a number that is not positive. */
export function choose(
	args: Value[],
	pick: (x: number, below: number, above: number) => number,
): Value {
	const [x = 0, name] = args;
	if (typeof name !== 'string' || isGrid(name))
		throw new Refusal('The second value is a series such as E24.');
	return map(x, (number) => {
		if (!(number > 0)) throw new Refusal('Preferred values exist for values above zero only.');
		const [below, above] = neighbours(number, name);
		return pick(number, below, above);
	});
}
