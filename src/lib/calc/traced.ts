import type { Node, TapeBuilder } from './doubt/tape';
import { isGrid, type Value } from './values';

/** A value on a tape: plain where it is exact, else a node, or a node for each member of a list. */
export type Traced =
	{ exact: Value } | { node: Node } | { shape: readonly number[]; nodes: Node[] };

export function isExact(traced: Traced): traced is { exact: Value } {
	return 'exact' in traced;
}

/** Nodes of a number or of all members of a list. */
export function nodesOf(tape: TapeBuilder, traced: Traced): Node[] {
	if ('nodes' in traced) return traced.nodes;
	if ('node' in traced) return [traced.node];
	const { exact } = traced;
	if (isGrid(exact)) return Array.from(exact.data, (x) => tape.constant(x));
	return [tape.constant(Number(exact))];
}

/** Dimensions of a list, undefined for a single number. */
export function shapeOf(traced: Traced): readonly number[] | undefined {
	if ('shape' in traced) return traced.shape;
	return 'exact' in traced && isGrid(traced.exact) ? traced.exact.shape : undefined;
}

/** Puts an operation of one number on the tape, for each member of a list. */
export function mapNodes(tape: TapeBuilder, x: Traced, fn: (node: Node) => Node): Traced {
	const nodes = nodesOf(tape, x).map(fn);
	const shape = shapeOf(x);
	return shape ? { shape, nodes } : { node: nodes[0]! };
}
