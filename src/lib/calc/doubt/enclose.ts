import {
	binaryRange,
	everything,
	Intervals,
	plus,
	product,
	slopeRange,
	slopeRanges,
	unaryRange,
	type Range,
} from './interval';
import { arity, Op } from './operations';
import type { Tape } from './tape';

/** What is certain of a line while its inputs stay in their intervals: its range and that of each derivative. */
export interface Enclosure {
	range: Range;
	/** Range of the derivative by each input it depends on, by the input's number. */
	slopes: ReadonlyMap<number, Range>;
}

/** Encloses one line by interval arithmetic; inputs deviate by `halfWidths`, by number, at most. */
export function enclose(
	tape: Tape,
	args: readonly Enclosure[],
	inputs: ArrayLike<number>,
	halfWidths: ArrayLike<number>,
): Enclosure {
	const nodes = forward(tape, args, inputs, halfWidths);
	const weights = backward(tape, nodes);
	const slopes = new Map<number, Range>();
	const add = (input: number, slope: Range) =>
		slopes.set(input, slopes.has(input) ? plus(slopes.get(input)!, slope) : slope);
	for (let i = 0; i < tape.ops.length; i++) {
		if (tape.ops[i] === Op.input) add(inputs[tape.a[i]!]!, weights.range(i));
		if (tape.ops[i] !== Op.argument) continue;
		const weight = weights.range(i);
		for (const [input, slope] of args[tape.a[i]!]!.slopes) add(input, product(weight, slope));
	}
	return { range: nodes.range(tape.ops.length - 1), slopes };
}

function forward(
	tape: Tape,
	args: readonly Enclosure[],
	inputs: ArrayLike<number>,
	halfWidths: ArrayLike<number>,
): Intervals {
	const { ops, a, b, c, numbers } = tape;
	const nodes = new Intervals(ops.length);
	for (let i = 0; i < ops.length; i++) {
		const op = ops[i]!;
		const x = a[i]!;
		let range = everything;
		if (op === Op.constant) range = [numbers[i]!, numbers[i]!];
		else if (op === Op.argument) range = args[x]!.range;
		else if (op === Op.input) range = [-halfWidths[inputs[x]!]!, halfWidths[inputs[x]!]!];
		else if (op === Op.select) {
			const condition = nodes.range(x);
			const [yes, no] = [nodes.range(b[i]!), nodes.range(c[i]!)];
			if (isZero(condition)) range = no;
			else if (isNotZero(condition)) range = yes;
			else range = [Math.min(yes[0], no[0]), Math.max(yes[1], no[1])];
		} else if (arity(op) === 1) range = unaryRange(op, nodes.range(x));
		else if (arity(op) === 2) range = binaryRange(op, nodes.range(x), nodes.range(b[i]!));
		nodes.set(i, range[0], range[1]);
	}
	return nodes;
}

function backward(tape: Tape, nodes: Intervals): Intervals {
	const { ops, a, b, c } = tape;
	const weights = new Intervals(ops.length);
	weights.set(ops.length - 1, 1, 1);
	const add = (node: number, slope: Range) => {
		if (isZero(slope)) return;
		const sum = plus(weights.range(node), slope);
		weights.set(node, sum[0], sum[1]);
	};
	for (let i = ops.length - 1; i >= 0; i--) {
		const weight = weights.range(i);
		const op = ops[i]!;
		if (op <= Op.input || isZero(weight)) continue;
		const x = a[i]!;
		if (op === Op.external) for (const operand of tape.calls[x]!.operands) add(operand, everything);
		else if (op === Op.select) {
			const condition = nodes.range(x);
			if (isNotZero(condition)) add(b[i]!, weight);
			else if (isZero(condition)) add(c[i]!, weight);
			else {
				const either: Range = [Math.min(0, weight[0]), Math.max(0, weight[1])];
				add(x, everything);
				add(b[i]!, either);
				add(c[i]!, either);
			}
		} else if (arity(op) === 1) {
			if (isFixed(nodes.range(x))) continue;
			add(x, product(weight, slopeRange(op, nodes.range(x), nodes.range(i))));
		} else {
			const y = b[i]!;
			const [first, second] = slopeRanges(op, nodes.range(x), nodes.range(y), nodes.range(i));
			if (!isFixed(nodes.range(x))) add(x, product(weight, first));
			if (!isFixed(nodes.range(y))) add(y, product(weight, second));
		}
	}
	return weights;
}

function isZero([low, high]: Range): boolean {
	return low === 0 && high === 0;
}

function isNotZero([low, high]: Range): boolean {
	return low > 0 || high < 0;
}

function isFixed([low, high]: Range): boolean {
	return low === high;
}
