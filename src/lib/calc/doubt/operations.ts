/**
 * Operations of a tape. Leaves first, then those of one operand, of two, of three, and external functions. Comparisons
 * give 1 or 0. `powi` raises to a whole constant power, which keeps derivatives defined for negative bases.
 */
export const Op = {
	constant: 0,
	argument: 1,
	input: 2,
	neg: 3,
	abs: 4,
	sign: 5,
	floor: 6,
	ceil: 7,
	round: 8,
	sqrt: 9,
	cbrt: 10,
	exp: 11,
	expm1: 12,
	log: 13,
	log10: 14,
	log2: 15,
	log1p: 16,
	sin: 17,
	cos: 18,
	tan: 19,
	asin: 20,
	acos: 21,
	atan: 22,
	sinh: 23,
	cosh: 24,
	tanh: 25,
	add: 26,
	sub: 27,
	mul: 28,
	div: 29,
	pow: 30,
	powi: 31,
	atan2: 32,
	hypot: 33,
	mod: 34,
	min: 35,
	max: 36,
	less: 37,
	lessEqual: 38,
	equal: 39,
	select: 40,
	external: 41,
} as const;

type Leaf = 'constant' | 'argument' | 'input';
export type Binary =
	| 'add'
	| 'sub'
	| 'mul'
	| 'div'
	| 'pow'
	| 'powi'
	| 'atan2'
	| 'hypot'
	| 'mod'
	| 'min'
	| 'max'
	| 'less'
	| 'lessEqual'
	| 'equal';
export type Unary = Exclude<keyof typeof Op, Leaf | Binary | 'select' | 'external'>;

/** Whether the result jumps somewhere: first order sees nothing of a jump. */
export function isStep(op: number): boolean {
	return (
		op === Op.sign ||
		(op >= Op.floor && op <= Op.round) ||
		op === Op.mod ||
		(op >= Op.less && op <= Op.equal)
	);
}

/** Whether first order needs a remark beside it: a jump, a corner, or a function of others. */
export function isSpecial(op: number): boolean {
	return (
		isStep(op) ||
		op === Op.abs ||
		op === Op.min ||
		op === Op.max ||
		op === Op.select ||
		op === Op.external
	);
}

/** Number of operands, those of external functions aside. */
export function arity(op: number): number {
	if (op < Op.neg || op === Op.external) return 0;
	if (op < Op.add) return 1;
	return op < Op.select ? 2 : 3;
}

/** Value of an operation of one operand. `round` takes halves away from zero. */
export function unaryValue(op: number, x: number): number {
	switch (op) {
		case Op.neg:
			return -x;
		case Op.abs:
			return Math.abs(x);
		case Op.sqrt:
			return Math.sqrt(x);
		case Op.exp:
			return Math.exp(x);
		case Op.log:
			return Math.log(x);
		case Op.log10:
			return Math.log10(x);
		case Op.log2:
			return Math.log2(x);
		case Op.sin:
			return Math.sin(x);
		case Op.cos:
			return Math.cos(x);
		case Op.tan:
			return Math.tan(x);
		case Op.sign:
			return Math.sign(x);
		case Op.floor:
			return Math.floor(x);
		case Op.ceil:
			return Math.ceil(x);
		case Op.round:
			return Math.sign(x) * Math.round(Math.abs(x));
		case Op.cbrt:
			return Math.cbrt(x);
		case Op.expm1:
			return Math.expm1(x);
		case Op.log1p:
			return Math.log1p(x);
		case Op.asin:
			return Math.asin(x);
		case Op.acos:
			return Math.acos(x);
		case Op.atan:
			return Math.atan(x);
		case Op.sinh:
			return Math.sinh(x);
		case Op.cosh:
			return Math.cosh(x);
		case Op.tanh:
			return Math.tanh(x);
		default:
			return NaN;
	}
}

/** Value of an operation of two operands. `mod` has the sign of the divisor and leaves x where the divisor is 0. */
export function binaryValue(op: number, x: number, y: number): number {
	switch (op) {
		case Op.add:
			return x + y;
		case Op.sub:
			return x - y;
		case Op.mul:
			return x * y;
		case Op.div:
			return x / y;
		case Op.pow:
		case Op.powi:
			return Math.pow(x, y);
		case Op.atan2:
			return Math.atan2(x, y);
		case Op.hypot:
			return Math.hypot(x, y);
		case Op.mod:
			return y === 0 ? x : x - y * Math.floor(x / y);
		case Op.min:
			return Math.min(x, y);
		case Op.max:
			return Math.max(x, y);
		case Op.less:
			return x < y ? 1 : 0;
		case Op.lessEqual:
			return x <= y ? 1 : 0;
		case Op.equal:
			return x === y ? 1 : 0;
		default:
			return NaN;
	}
}
