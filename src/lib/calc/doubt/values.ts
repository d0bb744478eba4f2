import { binaryValue, Op, unaryValue } from './operations';
import type { Tape } from './tape';

/** Deviations of a line at its estimate. */
const atEstimate = new Float64Array(0);

/**
 * Computes every node of a tape into `nodes` (at least as long as the tape) and returns the last one, the line's value.
 * A missing deviation counts as 0.
 */
export function evaluateTape(
	tape: Tape,
	args: ArrayLike<number>,
	nodes: Float64Array,
	deviations: ArrayLike<number> = atEstimate,
): number {
	const { ops, a, b, c, numbers } = tape;
	const length = ops.length;
	for (let i = 0; i < length; i++) {
		const op = ops[i]!;
		const x = a[i]!;
		if (op >= Op.add) {
			if (op === Op.add) nodes[i] = nodes[x]! + nodes[b[i]!]!;
			else if (op === Op.mul) nodes[i] = nodes[x]! * nodes[b[i]!]!;
			else if (op === Op.sub) nodes[i] = nodes[x]! - nodes[b[i]!]!;
			else if (op === Op.div) nodes[i] = nodes[x]! / nodes[b[i]!]!;
			else if (op < Op.select) nodes[i] = binaryValue(op, nodes[x]!, nodes[b[i]!]!);
			else if (op === Op.select) nodes[i] = nodes[x]! !== 0 ? nodes[b[i]!]! : nodes[c[i]!]!;
			else {
				const call = tape.calls[x]!;
				nodes[i] = call.external.value(gather(call.operands, nodes));
			}
		} else if (op === Op.argument) nodes[i] = args[x]!;
		else if (op === Op.constant) nodes[i] = numbers[i]!;
		else if (op === Op.input) nodes[i] = deviations[x] ?? 0;
		else nodes[i] = unaryValue(op, nodes[x]!);
	}
	return nodes[length - 1]!;
}

/** Operands of an external call, in their order. */
export function gather(operands: Int32Array, nodes: Float64Array): Float64Array {
	const values = new Float64Array(operands.length);
	for (let i = 0; i < operands.length; i++) values[i] = nodes[operands[i]!]!;
	return values;
}

let scratch = new Float64Array(256);

/** A buffer for the nodes of a tape, shared by callers that keep nothing in it. */
export function nodesFor(tape: Tape): Float64Array {
	if (scratch.length < tape.ops.length) scratch = new Float64Array(2 * tape.ops.length);
	return scratch;
}
