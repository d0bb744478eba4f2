import type { Argument } from './functions/function';
import { functions } from './functions/registry';
import type { ParsedLine } from './language/parse-line';
import type { Node, NodeOf } from './language/nodes';
import { Trouble } from './trouble';
import { differ, isPure, ofDimension, pure, spoken, truth, unknown, type Type } from './types';
import { over, raised, same, times } from './units/dimension';
import { coherentUnit } from './units/coherent';
import { isPure as isPureUnit, fromSymbol, type Unit } from './units/unit';
import { findSymbol } from './units/table';
import { takesPrefix } from './units/display';

/** What a line may refer to while its units are checked. */
export interface Types {
	/** Undefined for a name that has no usable type yet. */
	of(name: string): Type | undefined;
	function(name: string): ParsedLine | undefined;
	/** The number an expression has, where it can be told; exponents decide over units. */
	constant(node: Node): number | undefined;
	/** Calls being checked; a call inside itself is taken as unknown. */
	readonly calls: Map<string, Type>;
}

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
			return checkCall(node, types);
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
			return check(node.object, types);
		case 'convert':
			return checkConversion(node, types);
	}
}

/** Units other than a coherent one with a prefix stay in the readout: hours, percent, mV/°C. */
function ofLiteral(unit: Unit | undefined): Type {
	if (!unit) return pure;
	const { dimension } = unit;
	const first = unit.parts[0];
	const base = first && unit.parts.length === 1 && first.power === 1 ? first.symbol : undefined;
	if (base && takesPrefix(unit)) {
		const coherent = coherentUnit(dimension);
		const family = coherent.parts.length === 1 ? coherent.parts[0]?.symbol.base : undefined;
		if (family === base.base) return ofDimension(dimension);
		const plain = findSymbol(base.base);
		return { kind: 'number', dimension, ...(plain && { unit: fromSymbol(plain) }) };
	}
	if (coherentUnit(dimension).text === unit.text) return ofDimension(dimension);
	return {
		kind: 'number',
		dimension,
		unit,
		fixed: true,
		...(unit.offset !== 0 && { point: true }),
	};
}

/** The type that all parts share. */
function uniform(parts: Node[], found: Type[], what: string): Type {
	return found.reduce((a, b, i) =>
		alike(a, b, parts[i] ?? parts[0]!, (x, y) => `${what} one unit, not ${x} and ${y}.`),
	);
}

function numeric(node: Node, types: Types, doing: string): Type {
	const type = check(node, types);
	if (type.kind === 'boolean' || type.kind === 'series')
		throw new Trouble('dimension', node, `${doing} numbers, not ${spoken(type)}.`);
	return type;
}

function condition(node: Node, types: Types): void {
	const type = check(node, types);
	if (type.kind === 'number' || type.kind === 'series')
		throw new Trouble('dimension', node, `A condition is expected, not ${spoken(type)}.`, {
			mend: 'Compare it with something.',
		});
}

function expectPlain(node: Node, type: Type, what: string): void {
	if (type.dimension && !isPure(type))
		throw new Trouble('dimension', node, `${what} is a pure number, not ${spoken(type)}.`);
}

function noPoint(node: Node, type: Type, doing: string): void {
	if (!type.point) return;
	throw new Trouble('dimension', node, `${doing} ${spoken(type)}, which has a zero of its own.`, {
		mend: 'Take a difference, `(T - 0 degC)` say, or the absolute temperature, `(T to K)`.',
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

function checkSum(node: NodeOf<'binary'>, left: Type, right: Type): Type {
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

function alike(a: Type, b: Type, node: Node, message: (a: string, b: string) => string): Type {
	if (differ(a, b) || (a.point ?? false) !== (b.point ?? false))
		if (a.kind === 'number' && b.kind === 'number')
			throw new Trouble('dimension', node, message(spoken(a), spoken(b)));
	return joined(a, b);
}

function checkProduct(node: NodeOf<'binary'>, left: Type, right: Type): Type {
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

function checkCall(node: NodeOf<'call'>, types: Types): Type {
	const args: Argument[] = node.args.map((argument) => ({
		from: argument.from,
		to: argument.to,
		type: check(argument, types),
		...(argument.kind === 'unit' && { unit: argument.unit }),
	}));
	const known = functions.get(node.name);
	if (known) {
		expectCount(node, known.count, known.signature);
		return known.type(args);
	}
	const own = types.function(node.name);
	if (!own?.body) return unknown;
	const { parameters, body } = own;
	const signature = `${node.typed}(${parameters.map((p) => p.typed).join(', ')})`;
	expectCount(node, [parameters.length, parameters.length], signature);
	return checkOwn(
		node,
		body,
		parameters.map((p) => p.name),
		args,
		types,
	);
}

function checkOwn(
	node: NodeOf<'call'>,
	body: Node,
	names: string[],
	args: Argument[],
	types: Types,
): Type {
	const key = `${node.name}(${args.map(({ type }) => `${type.kind} ${type.dimension?.key ?? '?'} ${type.point ? 'p' : ''} ${type.unit?.text ?? ''}`).join(';')})`;
	const earlier = types.calls.get(key);
	if (earlier) return earlier;
	if (types.calls.size > 500) return unknown;
	types.calls.set(key, unknown);
	const bound = new Map(names.map((name, i) => [name, args[i]?.type ?? unknown]));
	const inner: Types = {
		of: (name) => bound.get(name) ?? types.of(name),
		function: (name) => types.function(name),
		constant: (wanted) =>
			wanted.kind === 'number'
				? wanted.value
				: types.constant(substituted(wanted, names, node.args)),
		calls: types.calls,
	};
	try {
		const type = check(body, inner);
		types.calls.set(key, type);
		return type;
	} catch (error) {
		types.calls.delete(key);
		if (!(error instanceof Trouble)) throw error;
		const first = error.message.charAt(0).toLowerCase() + error.message.slice(1);
		throw new Trouble(
			error.code,
			node,
			`\`${node.typed}\` cannot take these values: it ${first}`,
			{},
		);
	}
}

/** The expression with a call's values in place of the parameters; only for the short expressions of exponents. */
function substituted(node: Node, names: string[], values: Node[]): Node {
	if (node.kind === 'name') {
		const index = names.indexOf(node.name);
		return (index < 0 ? undefined : values[index]) ?? node;
	}
	if (node.kind === 'unary') return { ...node, value: substituted(node.value, names, values) };
	if (node.kind === 'binary')
		return {
			...node,
			left: substituted(node.left, names, values),
			right: substituted(node.right, names, values),
		};
	return node;
}

function expectCount(
	node: NodeOf<'call'>,
	[least, most]: readonly [number, number],
	signature: string,
): void {
	const given = node.args.length;
	if (given >= least && given <= most) return;
	const wanted =
		least === most ? `${least}` : most === Infinity ? `${least} or more` : `${least} to ${most}`;
	throw new Trouble(
		'syntax',
		node,
		`\`${node.typed}\` takes ${wanted} value${wanted === '1' ? '' : 's'}, not ${given}.`,
		{
			mend: `Write \`${signature}\`.`,
		},
	);
}
