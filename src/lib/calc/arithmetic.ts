import type { Comparison, NodeOf, Place } from './language/nodes';
import { Trouble } from './trouble';
import { isGrid, type Value } from './values';

/** Product of the whole numbers up to x; not a number for others. */
export function factorial(x: number): number {
	if (!Number.isInteger(x) || x < 0) return NaN;
	let result = 1;
	for (let i = 2; i <= x && Number.isFinite(result); i++) result *= i;
	return result;
}

/** An operator on two numbers. */
export function operate(op: NodeOf<'binary'>['op'], x: number, y: number): number {
	switch (op) {
		case '+':
			return x + y;
		case '-':
			return x - y;
		case '*':
		case '.*':
			return x * y;
		case '/':
		case './':
			return x / y;
		case '^':
		case '.^':
			return x ** y;
		case 'mod':
			return y === 0 ? x : x - y * Math.floor(x / y);
		default:
			return NaN;
	}
}

/** Passes finite values on. Throws Trouble that says what went out of range. */
export function finite(value: Value, at: Place, what?: string, op?: string, right?: Value): Value {
	const wrong = isGrid(value) ? value.data.find((x) => !Number.isFinite(x)) : value;
	if (typeof wrong !== 'number' || Number.isFinite(wrong)) return value;
	const zero = right !== undefined && (isGrid(right) ? right.data.includes(0) : right === 0);
	if ((op === '/' || op === './') && zero) throw new Trouble('overflow', at, 'Divides by zero.');
	if (Number.isNaN(wrong) && (op === '^' || op === '.^'))
		throw new Trouble('value', at, 'A root of a negative value is not a real number.');
	if (Number.isNaN(wrong))
		throw new Trouble('value', at, `${what ?? 'This'} has no real value here.`);
	if (op === '^' && right !== undefined && Number(right) < 0)
		throw new Trouble('overflow', at, 'Divides by zero, or by a value too small to compute with.');
	throw new Trouble(
		'overflow',
		at,
		`${what ?? 'The result'} is larger than any number that can be computed with.`,
		{
			mend: 'Numbers reach up to about 1.8e308.',
		},
	);
}

/** How far apart two values may be and still count as equal: what the last digits of computing leave. */
const tolerance = 1e-12;

/** Whether a comparison holds. Values that differ by rounding only are equal. */
export function holds(op: Comparison, x: number, y: number): boolean {
	const equal = x === y || Math.abs(x - y) <= tolerance * Math.max(Math.abs(x), Math.abs(y));
	switch (op) {
		case '<':
			return x < y && !equal;
		case '<=':
			return x < y || equal;
		case '>':
			return x > y && !equal;
		case '>=':
			return x > y || equal;
		case '==':
			return equal;
		case '!=':
			return !equal;
	}
}
