import { Trouble } from '../trouble';
import { spokenName } from '../units/table';
import { divided, multiplied, power, toSI, type Unit } from '../units/unit';
import type { BinaryOperator, Node, NodeOf, Place } from './nodes';

/** Below it numbers lose digits. */
const smallest = 2 ** -1022;

/** A number in a unit, `5 mV`, or without one. Throws Trouble where it is out of range. */
export function literal(typed: number, unit: Unit | undefined, place: Place): NodeOf<'number'> {
	const { from, to } = place;
	const value = unit ? toSI(typed, unit) : typed;
	if (!Number.isFinite(value)) throw outOfRange(place, 'This', 'larger');
	if (value === 0 ? typed !== 0 : Math.abs(value) < smallest)
		throw outOfRange(place, 'This', 'smaller');
	return { kind: 'number', typed, unit, value, from, to };
}

/** The fault of a number that is too large or too small to compute with. */
export function outOfRange(place: Place, what: string, how: 'larger' | 'smaller'): Trouble {
	const message = `${what} is ${how} than any number that can be computed with.`;
	const mend =
		how === 'larger' ? 'Numbers reach up to about 1.8e308.' : 'Numbers begin at about 2.3e-308.';
	return new Trouble('overflow', place, message, { mend });
}

/**
 * Joins what belongs to a unit: `5 mV`, `10 mV/degC`, `m/s^2`. Undefined where the operator works on values.
 * Throws Trouble where a unit symbol stands alone like a quantity, `R * C`: it would silently count as one coulomb.
 */
export function joinUnits(
	op: BinaryOperator,
	left: Node,
	right: Node,
	how: { implicit: boolean; closed: boolean },
): Node | undefined {
	const place = { from: left.from, to: right.to };
	if (op === '^' && left.kind === 'unit' && right.kind === 'number' && !right.unit)
		return { kind: 'unit', unit: power(left.unit, right.typed), ...place };
	if (right.kind !== 'unit' || (op !== '*' && op !== '/')) return undefined;
	const join = op === '*' ? multiplied : divided;
	if (left.kind === 'unit') return { kind: 'unit', unit: join(left.unit, right.unit), ...place };
	if (left.kind === 'number' && left.unit)
		return literal(left.typed, join(left.unit, right.unit), place);
	if (left.kind === 'number' && how.implicit) return literal(left.typed, right.unit, place);
	if (left.kind === 'number' && op === '/')
		return literal(left.typed, power(right.unit, -1), place);
	if (how.implicit && how.closed)
		return { kind: 'convert', value: left, unit: right.unit, scaled: true, ...place };
	if (endsInUnit(left))
		return { kind: 'binary', op, left, right: literal(1, linear(right.unit), right), ...place };
	throw bareUnit(right);
}

/** A temperature scale without its zero. */
function linear(unit: Unit): Unit {
	return unit.offset === 0 ? unit : power(unit, 1);
}

function endsInUnit(node: Node): boolean {
	if (node.kind === 'number') return node.unit !== undefined;
	return node.kind === 'binary' && (node.op === '*' || node.op === '/') && endsInUnit(node.right);
}

/** The fault of a unit symbol where a value is expected. */
export function bareUnit(node: NodeOf<'unit'>): Trouble {
	const { parts, label, text } = node.unit;
	const [only] = parts;
	const name = only && parts.length === 1 ? spokenName(only.symbol) : label;
	return new Trouble(
		'ambiguous',
		node,
		`\`${text}\` here reads as the unit ${name}, not as a quantity.`,
		{
			mend: `Write \`(1 ${text})\` for the unit, or give the quantity another name.`,
			replacement: `(1 ${text})`,
			unitName: text,
		},
	);
}
