import type { Binary } from './doubt/operations';
import type { Node as TapeNode, TapeBuilder } from './doubt/tape';
import type { BinaryOperator, Comparison, NodeOf, Place } from './language/nodes';
import { nodesOf, shapeOf, type Traced } from './traced';
import { Trouble } from './trouble';

const operations: Readonly<Partial<Record<BinaryOperator, Binary>>> = {
	'+': 'add',
	'-': 'sub',
	'*': 'mul',
	'.*': 'mul',
	'/': 'div',
	'./': 'div',
	'^': 'pow',
	'.^': 'pow',
	mod: 'mod',
	and: 'mul',
	or: 'max',
};

/** Puts an operator on the tape; numbers pair with each member of a list. Throws Trouble. */
export function operate(
	tape: TapeBuilder,
	node: NodeOf<'binary'>,
	left: Traced,
	right: Traced,
): Traced {
	const [rows, columns] = [shapeOf(left), shapeOf(right)];
	if (node.op === '*' && rows && columns) return product(tape, node, left, right);
	const operation = operations[node.op];
	return paired(tape, left, right, node, (x, y) =>
		operation ? tape.binary(operation, x, y) : tape.unary('abs', tape.binary('sub', x, y)),
	);
}

/** Applies an operation member by member. Throws Trouble where two lists differ in size. */
function paired(
	tape: TapeBuilder,
	left: Traced,
	right: Traced,
	at: Place,
	fn: (x: TapeNode, y: TapeNode) => TapeNode,
): Traced {
	const [a, b] = [nodesOf(tape, left), nodesOf(tape, right)];
	const [first, second] = [shapeOf(left), shapeOf(right)];
	if (first && second && first.join() !== second.join())
		throw new Trouble(
			'value',
			at,
			`The lists differ in size: ${first.join(' × ')} and ${second.join(' × ')}.`,
		);
	const shape = first ?? second;
	if (!shape) return { node: fn(a[0]!, b[0]!) };
	const count = Math.max(a.length, b.length);
	const nodes = Array.from({ length: count }, (_, i) => fn(a[first ? i : 0]!, b[second ? i : 0]!));
	return { shape, nodes };
}

function product(tape: TapeBuilder, at: Place, left: Traced, right: Traced): Traced {
	const [a, b] = [nodesOf(tape, left), nodesOf(tape, right)];
	const [first, second] = [shapeOf(left)!, shapeOf(right)!];
	const [rows, inner] = first.length === 2 ? [first[0]!, first[1]!] : [1, a.length];
	const [depth, columns] = second.length === 2 ? [second[0]!, second[1]!] : [b.length, 1];
	if (inner !== depth)
		throw new Trouble('value', at, `A product needs ${inner} rows on the right, not ${depth}.`);
	const nodes: TapeNode[] = [];
	for (let i = 0; i < rows; i++)
		for (let j = 0; j < columns; j++)
			nodes.push(
				sum(
					tape,
					Array.from({ length: inner }, (_, k) =>
						tape.binary('mul', a[i * inner + k]!, b[k * columns + j]!),
					),
				),
			);
	if (first.length === 1 && second.length === 1) return { node: nodes[0]! };
	return {
		shape: first.length === 2 && second.length === 2 ? [rows, columns] : [nodes.length],
		nodes,
	};
}

/** The sum of nodes. */
export function sum(tape: TapeBuilder, nodes: readonly TapeNode[]): TapeNode {
	return nodes.reduce((a, b) => tape.binary('add', a, b));
}

/** A chain of comparisons as 1 or 0. */
export function compare(
	tape: TapeBuilder,
	node: NodeOf<'compare'>,
	operands: readonly Traced[],
): Traced {
	const sides = operands.map((operand) => join(tape, operand, node));
	const parts = node.ops.map((op, i) => holds(tape, op, sides[i]!, sides[i + 1]!));
	return { node: parts.reduce((a, b) => tape.binary('mul', a, b)) };
}

function holds(tape: TapeBuilder, op: Comparison, x: TapeNode, y: TapeNode): TapeNode {
	switch (op) {
		case '<':
			return tape.binary('less', x, y);
		case '<=':
			return tape.binary('lessEqual', x, y);
		case '>':
			return tape.binary('less', y, x);
		case '>=':
			return tape.binary('lessEqual', y, x);
		case '==':
			return tape.binary('equal', x, y);
		case '!=':
			return tape.binary('sub', tape.constant(1), tape.binary('equal', x, y));
	}
}

/** Chooses between two values by a condition. Throws Trouble where they differ in size. */
export function choose(
	tape: TapeBuilder,
	condition: TapeNode,
	yes: Traced,
	no: Traced,
	at: Place,
): Traced {
	return paired(tape, yes, no, at, (a, b) => tape.select(condition, a, b));
}

/** The one node of a number. Throws Trouble for a list. */
export function join(tape: TapeBuilder, traced: Traced, at: Place): TapeNode {
	if (shapeOf(traced)) throw new Trouble('value', at, 'One number is expected here, not a list.');
	return nodesOf(tape, traced)[0]!;
}
