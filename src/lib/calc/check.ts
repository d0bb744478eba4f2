import { checkCall } from './check-calls';
import { alike, checkProduct, checkSum, expectPlain, noPoint, uniform } from './check-operators';
import type { Node, NodeOf } from './language/nodes';
import { ofLiteral } from './literal-type';
import { Trouble } from './trouble';
import type { Types } from './type-scope';
import {
	differ,
	isNumeric,
	isPure,
	ofDimension,
	pure,
	spoken,
	truth,
	unknown,
	type Type,
} from './types';
import { raised, same, times } from './units/dimension';
import { isPure as isPureUnit } from './units/unit';

/** Finds the type of an expression without computing it. Throws Trouble where units do not fit. */
export function check(node: Node, types: Types): Type {
	switch (node.kind) {
		case 'number':
			return ofLiteral(node.unit);
		case 'unit':
			return { kind: 'number', dimension: node.unit.dimension };
		case 'name':
			return types.of(node.name) ?? unknown;
		case 'series':
			return { kind: 'series' };
		case 'text':
			return { kind: 'text', text: node.value };
		case 'boolean':
			return truth;
		case 'unary':
			return checkUnary(node, types);
		case 'binary':
			return checkBinary(node, types);
		case 'compare':
			return checkComparison(node, types);
		case 'choice':
			return checkChoice(node, types);
		case 'call':
			return checkCall(node, types, check);
		case 'array': {
			const items = node.rows.flat();
			return uniform(
				items,
				items.map((item) => numeric(item, types, 'A list holds')),
				'A list has',
			);
		}
		case 'range': {
			const parts = node.step ? [node.start, node.step, node.end] : [node.start, node.end];
			return uniform(
				parts,
				parts.map((part) => numeric(part, types, 'A range counts')),
				'A range has',
			);
		}
		case 'index':
			for (const index of node.indexes)
				expectPlain(index, numeric(index, types, 'An index takes'), 'An index');
			return numeric(node.object, types, 'Places are those of');
		case 'convert':
			return checkConversion(node, types);
	}
}

function numeric(node: Node, types: Types, doing: string): Type {
	const type = check(node, types);
	if (!isNumeric(type))
		throw new Trouble('dimension', node, `${doing} numbers, not ${spoken(type)}.`);
	return type;
}

function condition(node: Node, types: Types): void {
	const type = check(node, types);
	if (type.kind !== 'boolean' && type.kind !== 'unknown')
		throw new Trouble('dimension', node, `A condition is expected, not ${spoken(type)}.`, {
			mend: 'Compare it with something.',
		});
}

function checkUnary(node: NodeOf<'unary'>, types: Types): Type {
	if (node.op === 'not') {
		condition(node.value, types);
		return truth;
	}
	const type = numeric(
		node.value,
		types,
		node.op === '!' ? 'A factorial takes' : 'A sign stands before',
	);
	if (node.op === '!') {
		expectPlain(node.value, type, 'The value of a factorial');
		return pure;
	}
	if (node.op === '-') noPoint(node, type, 'Changes the sign of');
	return type;
}

function checkBinary(node: NodeOf<'binary'>, types: Types): Type {
	const { op } = node;
	if (op === 'and' || op === 'or' || op === 'xor') {
		condition(node.left, types);
		condition(node.right, types);
		return truth;
	}
	const left = numeric(node.left, types, 'This operator takes');
	const right = numeric(node.right, types, 'This operator takes');
	switch (op) {
		case '+':
		case '-':
			return checkSum(node, left, right);
		case 'mod':
			return alike(left, right, node, (a, b) => `Takes the remainder of ${a} by ${b}.`);
		case '^':
		case '.^':
			return checkPower(node, left, right, types);
		default:
			return checkProduct(node, left, right);
	}
}

function checkPower(node: NodeOf<'binary'>, left: Type, right: Type, types: Types): Type {
	noPoint(node.left, left, 'Raises');
	if (right.dimension && !isPure(right))
		throw new Trouble(
			'dimension',
			node.right,
			`The exponent is a pure number, not ${spoken(right)}.`,
		);
	if (!left.dimension) return unknown;
	if (isPure(left)) return pure;
	const exponent = types.constant(node.right);
	return exponent === undefined ? unknown : ofDimension(raised(left.dimension, exponent));
}

function checkComparison(node: NodeOf<'compare'>, types: Types): Type {
	let previous: Type | undefined;
	for (const operand of node.operands) {
		const type = check(operand, types);
		if (type.kind === 'text' || type.kind === 'series')
			throw new Trouble('dimension', operand, `A comparison takes values, not ${spoken(type)}.`);
		if (previous) {
			const mixed =
				previous.kind !== type.kind && previous.kind !== 'unknown' && type.kind !== 'unknown';
			if (mixed || differ(previous, type)) {
				const [a, b] = [spoken(previous), spoken(type)];
				const unit = isPure(previous) ? b : isPure(type) ? a : undefined;
				throw new Trouble(
					'dimension',
					node,
					`Compares ${a} with ${b}.`,
					unit === undefined || mixed ? {} : { mend: `Give the pure number a unit, ${unit} say.` },
				);
			}
		}
		previous = type.kind === 'unknown' && previous ? previous : type;
	}
	return truth;
}

function checkChoice(node: NodeOf<'choice'>, types: Types): Type {
	condition(node.condition, types);
	const yes = check(node.yes, types);
	const no = check(node.no, types);
	for (const [type, part] of [
		[yes, node.yes],
		[no, node.no],
	] as const)
		if (type.kind === 'text')
			throw new Trouble('dimension', part, 'A choice is between values, not text in quotes.');
	if (yes.kind !== no.kind && yes.kind !== 'unknown' && no.kind !== 'unknown')
		throw new Trouble('dimension', node, `The two cases give ${spoken(yes)} and ${spoken(no)}.`);
	return alike(yes, no, node, (a, b) => `The two cases give ${a} and ${b}.`);
}

function checkConversion(node: NodeOf<'convert'>, types: Types): Type {
	const type = numeric(node.value, types, 'A unit belongs to');
	const { unit } = node;
	const point = unit.offset !== 0;
	const result: Type = {
		kind: 'number',
		dimension: unit.dimension,
		unit,
		fixed: true,
		...(point && { point }),
	};
	if (node.scaled) {
		if (type.dimension && !isPure(type)) {
			if (point)
				throw new Trouble('dimension', node, `Multiplies ${spoken(type)} by ${unit.label}.`);
			return ofDimension(times(type.dimension, unit.dimension));
		}
		const literal = ofLiteral(unit);
		return point || literal.fixed ? result : literal;
	}
	if (type.dimension && !same(type.dimension, unit.dimension))
		throw new Trouble(
			'dimension',
			node,
			`Converts ${spoken(type)} to ${isPureUnit(unit) ? `${unit.label}, a share` : unit.label}.`,
		);
	return result;
}
