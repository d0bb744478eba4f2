import { isRefusal, type Refusal as TableRefusal } from '../tables/refusal';
import type { Worked } from '../tables/worked';
import { isGrid, map, type Grid, type Value } from '../values';
import { answered, namesOf, type Names } from './answered';
import { Refusal, type CalcFunction } from './function';

/** One number, or the characters of a text. */
export type Single = Exclude<Value, Grid>;

interface Tabled extends Pick<
	CalcFunction,
	'name' | 'signature' | 'help' | 'examples' | 'source' | 'count' | 'type'
> {
	/** Answers in SI units, with a derivative for each value it is given. */
	answer: (args: Single[]) => Worked | TableRefusal;
	/** Position of the value that may be a list; the first where nothing is said. */
	listAt?: number;
	/** Operations that one answer takes, 1 where nothing is said. */
	effort?: (args: Value[]) => number;
	/** Names of values that the table calls otherwise than the signature. */
	names?: Names;
}

/** A function that a table of the trade answers: its derivatives are the table's. */
export function tabled({
	answer,
	listAt = 0,
	effort = () => 1,
	names,
	...about
}: Tabled): CalcFunction {
	const typed = namesOf(about.signature);
	const named = { ...Object.fromEntries(typed.map((name) => [lowered(name), name])), ...names };
	const singles = (args: Value[]): Single[] =>
		args.map((value, i) => {
			if (!isGrid(value)) return value;
			throw new Refusal(`\`${typed[i] ?? ''}\` is one value, not a list.`);
		});
	return {
		...about,
		compute: (args) => {
			const several = args[listAt];
			if (several === undefined || !isGrid(several))
				return answered(answer(singles(args)), named).value;
			const others = singles(args.map((value, i) => (i === listAt ? 0 : value)));
			return map(several, (x) => answered(answer(others.with(listAt, x)), named).value);
		},
		cost: (args) => {
			const several = args[listAt] ?? 0;
			return effort(args) * (isGrid(several) ? several.data.length : 1);
		},
		slopes: (args) => {
			const { derivatives } = answered(answer(singles(args)), named);
			return args.map((value, i) => (typeof value === 'string' ? 0 : (derivatives[i] ?? 0)));
		},
	};
}

/** As the tables spell the names of a signature: `Rs` is `rs`, `errorLsb` stays. */
function lowered(name: string): string {
	return name.charAt(0).toLowerCase() + name.slice(1);
}

/** An answer in another unit: its value as `value` says, its derivatives by each number times `factors`. */
export function rescaled(
	answer: Worked | TableRefusal,
	value: (value: number) => number,
	factors: number[],
): Worked | TableRefusal {
	if (isRefusal(answer)) return answer;
	return {
		value: value(answer.value),
		derivatives: answer.derivatives.map((slope, i) => slope * (factors[i] ?? 1)),
	};
}
