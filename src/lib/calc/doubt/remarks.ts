import { arity, isStep, Op } from './operations';
import type { Tape } from './tape';

/** What must be said beside a first-order result, as bits. */
export const Remark = {
	/** Taken at a point without a derivative: |x| at 0, equal sides of min or max, a step at its edge. */
	corner: 1,
	/** A doubtful value goes through a function that jumps, of which first order sees nothing. */
	step: 2,
	/** A slope comes from differences, not from differentiation. */
	differences: 4,
} as const;

/** Remarks on one tape at `nodes`; `doubtful[k]` says whether argument k depends on an input. */
export function remarksOf(tape: Tape, nodes: Float64Array, doubtful: readonly boolean[]): number {
	if (!tape.special) return 0;
	const { ops, a, b, c, calls } = tape;
	const marked = new Uint8Array(ops.length);
	let remarks = 0;
	for (let i = 0; i < ops.length; i++) {
		const op = ops[i]!;
		if (op === Op.input) marked[i] = 1;
		else if (op === Op.argument) marked[i] = doubtful[a[i]!] ? 1 : 0;
		else if (op === Op.external) {
			const { external, operands } = calls[a[i]!]!;
			marked[i] = operands.some((operand) => marked[operand] === 1) ? 1 : 0;
			if (marked[i] && !external.slopes) remarks |= Remark.differences;
		} else if (op > Op.input) {
			const count = arity(op);
			const [x, y] = [a[i]!, b[i]!];
			const mark = marked[x]! | (count > 1 ? marked[y]! : 0) | (count > 2 ? marked[c[i]!]! : 0);
			marked[i] = mark;
			if (!mark) continue;
			if (isStep(op)) remarks |= Remark.step;
			if (hasCorner(op, nodes[x]!, count > 1 ? nodes[y]! : 0)) remarks |= Remark.corner;
		}
	}
	return remarks;
}

function hasCorner(op: number, x: number, y: number): boolean {
	switch (op) {
		case Op.abs:
		case Op.sign:
			return x === 0;
		case Op.floor:
		case Op.ceil:
			return Number.isInteger(x);
		case Op.round:
			return Number.isInteger(x + 0.5);
		case Op.mod:
			return y === 0 || Number.isInteger(x / y);
		case Op.min:
		case Op.max:
		case Op.less:
		case Op.lessEqual:
		case Op.equal:
			return x === y;
		default:
			return false;
	}
}
