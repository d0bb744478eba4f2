import type { Node, NodeOf } from './language/nodes';
import { Trouble } from './trouble';
import { differ, isPure, ofDimension, pure, spoken, unknown, type Type } from './types';
import { over, times } from './units/dimension';

/** The type that all parts share. */
export function uniform(parts: Node[], found: Type[], what: string): Type {
	return found.reduce((a, b, i) =>
		alike(a, b, parts[i] ?? parts[0]!, (x, y) => `${what} one unit, not ${x} and ${y}.`),
	);
}

/** Throws where a temperature on a scale with its own zero would be multiplied. */
export function noPoint(node: Node, type: Type, doing: string): void {
	if (!type.point) return;
	throw new Trouble('dimension', node, `${doing} ${spoken(type)}, which has a zero of its own.`, {
		mend: 'Take a difference, `(T - 0 degC)` say, or the absolute temperature, `(T to K)`.',
	});
}

/** Throws unless the type is that of a pure number or unknown. */
export function expectPlain(node: Node, type: Type, what: string): void {
	if (type.dimension && !isPure(type))
		throw new Trouble('dimension', node, `${what} is a pure number, not ${spoken(type)}.`);
}

/** Type of a sum or a difference. Throws Trouble that names both sides. */
export function checkSum(node: NodeOf<'binary'>, left: Type, right: Type): Type {
	const adds = node.op === '+';
	if (differ(left, right)) {
		const [a, b] = [spoken(left), spoken(right)];
		const unit = isPure(left) ? b : isPure(right) ? a : undefined;
		const message = adds ? `Adds ${a} to ${b}.` : `Subtracts ${b} from ${a}.`;
		throw new Trouble(
			'dimension',
			node,
			message,
			unit === undefined ? {} : { mend: `Give the pure number a unit, ${unit} say.` },
		);
	}
	if (left.point && right.point) {
		if (!adds) return ofDimension(left.dimension ?? right.dimension ?? pure.dimension!);
		throw new Trouble('dimension', node, `Adds two temperatures in ${left.unit?.label ?? '°C'}.`, {
			mend: 'Give the difference in kelvin: `25 degC + 5 K`.',
		});
	}
	if (right.point && !adds)
		throw new Trouble('dimension', node, `Subtracts ${spoken(right)} from a difference.`, {
			mend: 'Turn the two around, or take the absolute temperature, `(T to K)`.',
		});
	if (left.point) return left;
	if (right.point) return right;
	return joined(left, right);
}

/** The shared unit of two values of one dimension. */
function joined(left: Type, right: Type): Type {
	if (left.dimension === undefined) return right.kind === 'unknown' ? unknown : { ...right };
	if (left.unit?.text === right.unit?.text || right.kind === 'unknown') return left;
	if (isPure(left)) return pure;
	return left.unit ? left : right;
}

/** Type of two values of which one or the other counts. Throws Trouble with the message for what they are. */
export function alike(
	a: Type,
	b: Type,
	node: Node,
	message: (a: string, b: string) => string,
): Type {
	if (differ(a, b) || (a.point ?? false) !== (b.point ?? false))
		if (a.kind === 'number' && b.kind === 'number')
			throw new Trouble('dimension', node, message(spoken(a), spoken(b)));
	return joined(a, b);
}

/** Type of a product or a quotient. */
export function checkProduct(node: NodeOf<'binary'>, left: Type, right: Type): Type {
	const divides = node.op === '/' || node.op === './';
	noPoint(node.left, left, divides ? 'Divides' : 'Multiplies');
	noPoint(node.right, right, divides ? 'Divides by' : 'Multiplies');
	if (!left.dimension || !right.dimension) return unknown;
	if (
		isPure(right) &&
		!(isPure(left) && right.unit && left.unit) &&
		!(isPure(left) && right.unit && divides)
	)
		return isPure(left) && right.unit ? right : left;
	if (isPure(left) && !divides) return right;
	return ofDimension(
		divides ? over(left.dimension, right.dimension) : times(left.dimension, right.dimension),
	);
}
