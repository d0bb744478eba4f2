import { binaryValue, Op, unaryValue } from './operations';

/** Two blocks of trials to a third, `count` of them. */
export function binaryBlock(
	op: number,
	x: Float64Array,
	y: Float64Array,
	out: Float64Array,
	count: number,
): void {
	switch (op) {
		case Op.add:
			for (let i = 0; i < count; i++) out[i] = x[i]! + y[i]!;
			return;
		case Op.sub:
			for (let i = 0; i < count; i++) out[i] = x[i]! - y[i]!;
			return;
		case Op.mul:
			for (let i = 0; i < count; i++) out[i] = x[i]! * y[i]!;
			return;
		case Op.div:
			for (let i = 0; i < count; i++) out[i] = x[i]! / y[i]!;
			return;
		default:
			for (let i = 0; i < count; i++) out[i] = binaryValue(op, x[i]!, y[i]!);
	}
}

/** A block of trials and one number, in this order or `swapped`. */
export function scalarBlock(
	op: number,
	x: Float64Array,
	y: number,
	swapped: boolean,
	out: Float64Array,
	count: number,
): void {
	if (op === Op.add) for (let i = 0; i < count; i++) out[i] = x[i]! + y;
	else if (op === Op.mul) for (let i = 0; i < count; i++) out[i] = x[i]! * y;
	else if (op === Op.sub && !swapped) for (let i = 0; i < count; i++) out[i] = x[i]! - y;
	else if (op === Op.sub) for (let i = 0; i < count; i++) out[i] = y - x[i]!;
	else if (op === Op.div && !swapped) for (let i = 0; i < count; i++) out[i] = x[i]! / y;
	else if (op === Op.div) for (let i = 0; i < count; i++) out[i] = y / x[i]!;
	else if (op === Op.powi && !swapped && y === 2)
		for (let i = 0; i < count; i++) out[i] = x[i]! * x[i]!;
	else if (swapped) for (let i = 0; i < count; i++) out[i] = binaryValue(op, y, x[i]!);
	else for (let i = 0; i < count; i++) out[i] = binaryValue(op, x[i]!, y);
}

/** A block of trials through an operation of one operand. */
export function unaryBlock(op: number, x: Float64Array, out: Float64Array, count: number): void {
	switch (op) {
		case Op.neg:
			for (let i = 0; i < count; i++) out[i] = -x[i]!;
			return;
		case Op.abs:
			for (let i = 0; i < count; i++) out[i] = Math.abs(x[i]!);
			return;
		case Op.sqrt:
			for (let i = 0; i < count; i++) out[i] = Math.sqrt(x[i]!);
			return;
		case Op.exp:
			for (let i = 0; i < count; i++) out[i] = Math.exp(x[i]!);
			return;
		case Op.log:
			for (let i = 0; i < count; i++) out[i] = Math.log(x[i]!);
			return;
		default:
			for (let i = 0; i < count; i++) out[i] = unaryValue(op, x[i]!);
	}
}
