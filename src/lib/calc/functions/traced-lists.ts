import type { Binary } from '../doubt/operations';
import type { Node, TapeBuilder } from '../doubt/tape';
import { sum } from '../trace-operators';
import { nodesOf, type Traced } from '../traced';
import { Refusal } from './function';

/** Nodes of all numbers of all values, lists spread out. */
export function allNodes(tape: TapeBuilder, args: readonly Traced[]): Node[] {
	return args.flatMap((arg) => nodesOf(tape, arg));
}

/** Puts an operation between all numbers. */
export function folded(tape: TapeBuilder, args: readonly Traced[], operation: Binary): Traced {
	const nodes = allNodes(tape, args);
	const [only] = nodes;
	// The operation of one number with itself would be another: |x| is hypot of x alone.
	if (nodes.length === 1 && operation === 'hypot') return { node: tape.unary('abs', only!) };
	return { node: nodes.reduce((a, b) => tape.binary(operation, a, b)) };
}

export function meanOf(tape: TapeBuilder, nodes: readonly Node[]): Node {
	return tape.binary('div', sum(tape, nodes), tape.constant(nodes.length));
}

/** Variance of a sample, divisor n − 1. Throws Refusal for fewer than two values. */
export function varianceOf(tape: TapeBuilder, nodes: readonly Node[]): Node {
	if (nodes.length < 2) throw new Refusal('A spread needs two values or more.');
	const mean = meanOf(tape, nodes);
	const squares = nodes.map((node) =>
		tape.binary('pow', tape.binary('sub', node, mean), tape.constant(2)),
	);
	return tape.binary('div', sum(tape, squares), tape.constant(nodes.length - 1));
}
