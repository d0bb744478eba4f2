import { Op } from './operations';
import { binarySlopes, unarySlopes } from './slopes';
import type { External, Tape } from './tape';
import { gather } from './values';

const d = new Float64Array(3);
let adjoints = new Float64Array(256);

/**
 * Derivatives of a tape's value by its arguments and by its own inputs, in one backward pass over `nodes` as
 * `evaluateTape` left them. The two arrays are overwritten.
 */
export function partials(
	tape: Tape,
	nodes: Float64Array,
	byArgument: Float64Array,
	byInput: Float64Array,
): void {
	const { ops, a, b, c } = tape;
	const last = ops.length - 1;
	if (adjoints.length <= last) adjoints = new Float64Array(2 * ops.length);
	const weights = adjoints;
	weights.fill(0, 0, last);
	weights[last] = 1;
	byArgument.fill(0);
	byInput.fill(0);
	for (let i = last; i >= 0; i--) {
		const weight = weights[i]!;
		// An infinite slope of something that does not count must not turn into NaN.
		if (weight === 0) continue;
		const op = ops[i]!;
		const x = a[i]!;
		if (op === Op.argument) byArgument[x]! += weight;
		else if (op === Op.input) byInput[x]! += weight;
		else if (op >= Op.add && op < Op.select) {
			const y = b[i]!;
			if (op === Op.mul) {
				weights[x]! += weight * nodes[y]!;
				weights[y]! += weight * nodes[x]!;
				continue;
			}
			if (op === Op.add || op === Op.sub) {
				weights[x]! += weight;
				weights[y]! += op === Op.add ? weight : -weight;
				continue;
			}
			if (op === Op.div) {
				const share = weight / nodes[y]!;
				weights[x]! += share;
				weights[y]! -= share * nodes[i]!;
				continue;
			}
			binarySlopes(op, nodes[x]!, nodes[y]!, nodes[i]!, d);
			weights[x]! += weight * d[0]!;
			weights[y]! += weight * d[1]!;
		} else if (op === Op.select) weights[nodes[x]! !== 0 ? b[i]! : c[i]!]! += weight;
		else if (op === Op.external) {
			const { external, operands } = tape.calls[x]!;
			const by = externalSlopes(external, gather(operands, nodes));
			for (let k = 0; k < operands.length; k++) weights[operands[k]!]! += weight * by[k]!;
		} else if (op > Op.input) {
			unarySlopes(op, nodes[x]!, nodes[i]!, d);
			weights[x]! += weight * d[0]!;
		}
	}
}

/** Cube root of the machine epsilon: the relative step that balances the two errors of a central difference. */
const step = Math.cbrt(Number.EPSILON);

/** Derivatives of an external function by its operands: its own, or central differences where it gives none. */
export function externalSlopes(external: External, at: Float64Array): Float64Array {
	const slopes = new Float64Array(at.length);
	if (external.slopes) {
		external.slopes(at, slopes);
		return slopes;
	}
	for (let k = 0; k < at.length; k++) {
		const x = at[k]!;
		const high = x + step * (x === 0 ? 1 : Math.abs(x));
		const low = x - (high - x);
		at[k] = high;
		const upper = external.value(at);
		at[k] = low;
		const lower = external.value(at);
		at[k] = x;
		slopes[k] = (upper - lower) / (high - low);
	}
	return slopes;
}
