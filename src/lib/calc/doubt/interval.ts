import { Op } from './operations';

/**
 * Interval arithmetic, rounded outwards by more than the error of the operation, on pairs of numbers kept in two
 * arrays. Where a function is not defined on all of an operand the result is everything.
 */
export class Intervals {
	readonly low: Float64Array;
	readonly high: Float64Array;

	constructor(length: number) {
		this.low = new Float64Array(length);
		this.high = new Float64Array(length);
	}

	set(i: number, low: number, high: number): void {
		const lost = Number.isNaN(low) || Number.isNaN(high);
		this.low[i] = lost ? -Infinity : low;
		this.high[i] = lost ? Infinity : high;
	}

	range(i: number): Range {
		return [this.low[i]!, this.high[i]!];
	}
}

export type Range = readonly [low: number, high: number];

export const everything: Range = [-Infinity, Infinity];

/** Relative widening of each result: some units in the last place, for library functions a few more. */
const grain = 4 * Number.EPSILON;

function widened(low: number, high: number): Range {
	if (Number.isNaN(low) || Number.isNaN(high)) return everything;
	return [low - Math.abs(low) * grain, high + Math.abs(high) * grain];
}

export function plus([a, b]: Range, [c, d]: Range): Range {
	return widened(a + c, b + d);
}

export function minus([a, b]: Range, [c, d]: Range): Range {
	return widened(a - d, b - c);
}

/** Zero times anything is zero here: an infinite end stands for values without bound, each of them finite. */
function multiply(x: number, y: number): number {
	return x === 0 || y === 0 ? 0 : x * y;
}

export function product([a, b]: Range, [c, d]: Range): Range {
	const ends = [multiply(a, c), multiply(a, d), multiply(b, c), multiply(b, d)];
	return widened(Math.min(...ends), Math.max(...ends));
}

export function quotient(x: Range, [c, d]: Range): Range {
	return c <= 0 && d >= 0 ? everything : product(x, widened(1 / d, 1 / c));
}

/** A function that only rises, or only falls, on an interval on which it is defined. */
function monotonic(f: (x: number) => number, [a, b]: Range): Range {
	const [first, last] = [f(a), f(b)];
	return widened(Math.min(first, last), Math.max(first, last));
}

function square([a, b]: Range): Range {
	return wholePower([a, b], 2);
}

function wholePower([a, b]: Range, n: number): Range {
	if (n === 0) return [1, 1];
	if (n < 0) return quotient([1, 1], wholePower([a, b], -n));
	if (n % 2 === 1 || a >= 0 || b <= 0) return monotonic((x) => Math.pow(x, n), [a, b]);
	return widened(0, Math.max(Math.pow(a, n), Math.pow(b, n)));
}

/** Sine of an interval: its ends, and 1 or −1 where a crest or trough lies inside. */
function sine([a, b]: Range): Range {
	if (!(b - a < 2 * Math.PI)) return [-1, 1];
	const has = (at: number) => Math.floor((b - at) / (2 * Math.PI)) >= (a - at) / (2 * Math.PI);
	const [low, high] = monotonic(Math.sin, [a, b]);
	return [has(-Math.PI / 2) ? -1 : low, has(Math.PI / 2) ? 1 : high];
}

const quarter = Math.PI / 2;

export function unaryRange(op: number, x: Range): Range {
	const [a, b] = x;
	switch (op) {
		case Op.neg:
			return [-b, -a];
		case Op.abs:
			return a >= 0 ? x : b <= 0 ? [-b, -a] : [0, Math.max(-a, b)];
		case Op.sign:
			return [Math.sign(a), Math.sign(b)];
		case Op.floor:
			return [Math.floor(a), Math.floor(b)];
		case Op.ceil:
			return [Math.ceil(a), Math.ceil(b)];
		case Op.round:
			return [Math.floor(a + 0.5) - (a < 0 ? 1 : 0), Math.ceil(b - 0.5) + (b > 0 ? 1 : 0)];
		case Op.sqrt:
			return a < 0 ? everything : monotonic(Math.sqrt, x);
		case Op.cbrt:
			return monotonic(Math.cbrt, x);
		case Op.exp:
			return monotonic(Math.exp, x);
		case Op.expm1:
			return monotonic(Math.expm1, x);
		case Op.log:
			return a <= 0 ? everything : monotonic(Math.log, x);
		case Op.log10:
			return a <= 0 ? everything : monotonic(Math.log10, x);
		case Op.log2:
			return a <= 0 ? everything : monotonic(Math.log2, x);
		case Op.log1p:
			return a <= -1 ? everything : monotonic(Math.log1p, x);
		case Op.sin:
			return sine(x);
		case Op.cos:
			return sine(plus(x, [quarter, quarter]));
		case Op.tan: {
			const turn = Math.round(a / Math.PI);
			const [from, to] = [a - turn * Math.PI, b - turn * Math.PI];
			return from > -quarter && to < quarter ? monotonic(Math.tan, x) : everything;
		}
		case Op.asin:
			return a < -1 || b > 1 ? everything : monotonic(Math.asin, x);
		case Op.acos:
			return a < -1 || b > 1 ? everything : monotonic(Math.acos, x);
		case Op.atan:
			return monotonic(Math.atan, x);
		case Op.sinh:
			return monotonic(Math.sinh, x);
		case Op.cosh: {
			const [from, to] = unaryRange(Op.abs, x);
			return monotonic(Math.cosh, [from, to]);
		}
		case Op.tanh:
			return monotonic(Math.tanh, x);
		default:
			return everything;
	}
}

export function binaryRange(op: number, x: Range, y: Range): Range {
	const [[a, b], [c, d]] = [x, y];
	switch (op) {
		case Op.add:
			return plus(x, y);
		case Op.sub:
			return minus(x, y);
		case Op.mul:
			return product(x, y);
		case Op.div:
			return quotient(x, y);
		case Op.powi:
			return wholePower(x, c);
		case Op.pow:
			return a <= 0 ? everything : unaryRange(Op.exp, product(y, unaryRange(Op.log, x)));
		case Op.hypot:
			return monotonic(Math.sqrt, plus(square(x), square(y)));
		case Op.atan2:
			// Left of the axis the angle jumps; elsewhere its ends are at the corners.
			return c > 0 || a > 0 || b < 0 ? corners(Math.atan2, x, y) : everything;
		case Op.min:
			return [Math.min(a, c), Math.min(b, d)];
		case Op.max:
			return [Math.max(a, c), Math.max(b, d)];
		case Op.mod:
			return c > 0 ? [0, d] : d < 0 ? [c, 0] : everything;
		case Op.less:
			return [b < c ? 1 : 0, a < d ? 1 : 0];
		case Op.lessEqual:
			return [b <= c ? 1 : 0, a <= d ? 1 : 0];
		case Op.equal:
			return [a === b && c === d && a === c ? 1 : 0, a <= d && c <= b ? 1 : 0];
		default:
			return everything;
	}
}

function corners(f: (x: number, y: number) => number, [a, b]: Range, [c, d]: Range): Range {
	const ends = [f(a, c), f(a, d), f(b, c), f(b, d)];
	return widened(Math.min(...ends), Math.max(...ends));
}

/** Range of the first derivative of an operation of one operand, whose own range is v. */
export function slopeRange(op: number, x: Range, v: Range): Range {
	const one: Range = [1, 1];
	switch (op) {
		case Op.neg:
			return [-1, -1];
		case Op.abs:
			return [x[0] < 0 ? -1 : x[1] <= 0 ? 0 : 1, x[1] > 0 ? 1 : x[0] >= 0 ? 0 : -1];
		case Op.sqrt:
			return quotient([0.5, 0.5], v);
		case Op.cbrt:
			return quotient(one, product([3, 3], square(v)));
		case Op.exp:
			return v;
		case Op.expm1:
			return plus(v, one);
		case Op.log:
			return quotient(one, x);
		case Op.log10:
			return quotient([Math.LOG10E, Math.LOG10E], x);
		case Op.log2:
			return quotient([Math.LOG2E, Math.LOG2E], x);
		case Op.log1p:
			return quotient(one, plus(x, one));
		case Op.sin:
			return unaryRange(Op.cos, x);
		case Op.cos:
			return unaryRange(Op.neg, unaryRange(Op.sin, x));
		case Op.tan:
			return plus(one, square(v));
		case Op.asin:
			return quotient(one, unaryRange(Op.sqrt, minus(one, square(x))));
		case Op.acos:
			return quotient([-1, -1], unaryRange(Op.sqrt, minus(one, square(x))));
		case Op.atan:
			return quotient(one, plus(one, square(x)));
		case Op.sinh:
			return unaryRange(Op.cosh, x);
		case Op.cosh:
			return unaryRange(Op.sinh, x);
		case Op.tanh:
			return minus(one, square(v));
		// Steps rise or fall by jumps, which no slope shows.
		default:
			return everything;
	}
}

/** Ranges of both first derivatives of an operation of two operands, whose own range is v. */
export function slopeRanges(op: number, x: Range, y: Range, v: Range): [Range, Range] {
	const one: Range = [1, 1];
	switch (op) {
		case Op.add:
			return [one, one];
		case Op.sub:
			return [one, [-1, -1]];
		case Op.mul:
			return [y, x];
		case Op.div:
			return [quotient(one, y), unaryRange(Op.neg, quotient(v, y))];
		case Op.powi:
			return [product(y, wholePower(x, y[0] - 1)), [0, 0]];
		case Op.pow:
			return [quotient(product(y, v), x), product(v, unaryRange(Op.log, x))];
		case Op.hypot:
			return [quotient(x, v), quotient(y, v)];
		case Op.atan2: {
			if (v === everything) return [everything, everything];
			const squares = plus(square(x), square(y));
			return [quotient(y, squares), unaryRange(Op.neg, quotient(x, squares))];
		}
		case Op.min:
			return choice(x[1] <= y[0], y[1] <= x[0]);
		case Op.max:
			return choice(x[0] >= y[1], y[0] >= x[1]);
		default:
			return [everything, everything];
	}
}

/** Slopes of min and max: one operand for certain, or one of the two. */
function choice(first: boolean, second: boolean): [Range, Range] {
	if (first)
		return [
			[1, 1],
			[0, 0],
		];
	if (second)
		return [
			[0, 0],
			[1, 1],
		];
	return [
		[0, 1],
		[0, 1],
	];
}
