import type * as M from 'mathjs';
import { constants } from '../functions/constants';
import { functions } from '../functions/registry';
import { series } from '../functions/series';
import { Trouble } from '../trouble';
import { findSymbol } from '../units/table';
import { fromSymbol, power } from '../units/unit';
import { asTyped, canonical, percent } from './characters';
import { bareUnit, joinUnits, literal, outOfRange } from './literals';
import { nearest, unitNames } from './names';
import type {
	BinaryOperator,
	Comparison,
	Node,
	NodeOf,
	Place,
	Reference,
	UnitBehindNumber,
} from './nodes';
import { Places } from './places';
import type { Token } from './tokens';

const binary: Readonly<Record<string, BinaryOperator>> = {
	add: '+',
	subtract: '-',
	multiply: '*',
	divide: '/',
	pow: '^',
	dotMultiply: '.*',
	dotDivide: './',
	dotPow: '.^',
	mod: 'mod',
	and: 'and',
	or: 'or',
	xor: 'xor',
};
const comparisons: Readonly<Record<string, Comparison>> = {
	smaller: '<',
	smallerEq: '<=',
	larger: '>',
	largerEq: '>=',
	equal: '==',
	unequal: '!=',
};

/**
 * Turns mathjs's tree into ours. What it does not know is refused: this is the allow-list, and nothing but its
 * result is ever computed. mathjs's leaves stand in source order, so that each takes its place from the tokens.
 */
export class Lowering {
	readonly references: Reference[] = [];
	/** Unit symbols that stand directly behind a number. */
	readonly unitsBehindNumbers: UnitBehindNumber[] = [];
	readonly #places: Places;

	constructor(
		tokens: readonly Token[],
		private readonly parameters: ReadonlySet<string> = new Set(),
		start = 0,
	) {
		this.#places = new Places(tokens, start);
	}

	/** An expression with a value. */
	value(node: M.MathNode): Node {
		const lowered = this.#any(node);
		if (lowered.kind === 'unit') throw bareUnit(lowered);
		return lowered;
	}

	/** An expression that must be a unit, as behind `to`. */
	unit(node: M.MathNode): NodeOf<'unit'> {
		const lowered = this.#any(node);
		if (lowered.kind === 'unit') return lowered;
		if (lowered.kind === 'number' && lowered.typed === 1 && lowered.unit)
			return { kind: 'unit', unit: lowered.unit, from: lowered.from, to: lowered.to };
		const typed = lowered.kind === 'name' ? lowered.typed : undefined;
		const near = typed === undefined ? undefined : nearest(typed, unitNames());
		throw new Trouble(
			typed === undefined ? 'syntax' : 'unknownName',
			lowered,
			typed === undefined ? 'A unit is expected here.' : `There is no unit \`${typed}\`.`,
			near === undefined ? {} : { mend: `Did you mean \`${near}\`?`, replacement: near },
		);
	}

	#any(node: M.MathNode): Node {
		switch (node.type) {
			case 'ConstantNode':
				return this.#constant(node as M.ConstantNode);
			case 'SymbolNode':
				return this.#symbol(node as M.SymbolNode);
			case 'ParenthesisNode':
				return this.#places.widened(this.#any((node as M.ParenthesisNode).content), 1, 1);
			case 'OperatorNode':
				return this.#operator(node as M.OperatorNode);
			case 'RelationalNode':
				return this.#relation(node as unknown as { conditionals: string[]; params: M.MathNode[] });
			case 'ConditionalNode':
				return this.#choice(node as M.ConditionalNode);
			case 'FunctionNode':
				return this.#call(node as M.FunctionNode);
			case 'ArrayNode':
				return this.#array(node as M.ArrayNode);
			case 'RangeNode':
				return this.#range(node as M.RangeNode);
			case 'AccessorNode':
				return this.#index(node as M.AccessorNode);
			case 'AssignmentNode':
			case 'FunctionAssignmentNode':
				throw new Trouble(
					'notAllowed',
					this.#places.line(),
					'A line defines one name, at its beginning.',
					{
						mend: 'Give each quantity a line of its own.',
					},
				);
			case 'BlockNode':
				throw new Trouble(
					'notAllowed',
					this.#places.line(),
					'A line holds one formula, without `;`.',
					{
						mend: 'Give each formula a line of its own.',
					},
				);
			default:
				throw new Trouble(
					'notAllowed',
					this.#places.line(),
					'This is not part of the formula language.',
				);
		}
	}

	#constant(node: M.ConstantNode): Node {
		const token = this.#places.leaf();
		const value: unknown = node.value;
		if (typeof value === 'boolean') return { kind: 'boolean', value, ...place(token) };
		if (typeof value === 'string' && token.kind === 'text')
			return { kind: 'text', value: asTyped(token.text.slice(1, -1)), ...place(token) };
		if (typeof value !== 'number' || token.kind !== 'number')
			throw new Trouble('notAllowed', place(token), `\`${token.text}\` is not a value here.`);
		const typed = `\`${token.text}\``;
		if (!Number.isFinite(value)) throw outOfRange(place(token), typed, 'larger');
		// `1e-400` is read as 0.
		if (value === 0 && /^[^eE]*[1-9]/.test(token.text))
			throw outOfRange(place(token), typed, 'smaller');
		return literal(value, undefined, token);
	}

	#symbol(node: M.SymbolNode): Node {
		const token = this.#places.leaf(node.name);
		const at = place(token);
		if (token.text.includes(percent) && token.text !== percent) return this.#joinedPercent(token);
		const typed = asTyped(token.text);
		const name = canonical(typed);
		if (this.parameters.has(name)) return { kind: 'name', name, typed, ...at };
		const symbol = findSymbol(typed);
		if (symbol) {
			const before = this.#places.before(token.from);
			if (before?.kind === 'number')
				this.unitsBehindNumbers.push({ typed, number: before.text, from: before.from, to: at.to });
			return { kind: 'unit', unit: fromSymbol(symbol), ...at };
		}
		if (series.has(name)) return { kind: 'series', name, ...at };
		const constant = constants.get(name);
		if (constant) return { ...literal(constant.value, constant.unit, at), typed: constant.value };
		if (functions.has(name))
			throw new Trouble(
				'syntax',
				at,
				`\`${typed}\` is a function and needs its values in brackets.`,
				{
					mend: `Write \`${functions.get(name)?.signature ?? typed}\`.`,
				},
			);
		this.#refer(name, typed, at, false);
		return { kind: 'name', name, typed, ...at };
	}

	/** `x%` is one word to mathjs: a name and the percent sign. */
	#joinedPercent(token: Token): Node {
		const text = token.text.slice(0, -1);
		if (text.includes(percent) || !token.text.endsWith(percent)) throw remainder(place(token));
		throw new Trouble('syntax', place(token), `\`%\` stands behind a number: \`0.1 %\`.`, {
			mend: `Write \`${asTyped(text)} * 1 %\`.`,
			replacement: `${asTyped(text)} * 1 %`,
		});
	}

	#refer(name: string, typed: string, at: Place, called: boolean): void {
		if (!this.references.some((r) => r.name === name && r.called === called))
			this.references.push({ name, typed, called, ...at });
	}

	#operator(node: M.OperatorNode): Node {
		const [first, second] = node.args;
		const fn = node.fn as string;
		if (!first)
			throw new Trouble(
				'notAllowed',
				this.#places.line(),
				'This operator is not part of formulas.',
			);
		if (!second) return this.#unary(fn, first);
		if (fn === 'to') {
			const value = this.value(first);
			const { unit, to } = this.unit(second);
			return { kind: 'convert', value, unit, scaled: false, from: value.from, to };
		}
		const comparison = comparisons[fn];
		if (comparison) return this.#relation({ conditionals: [fn], params: [first, second] });
		const op = binary[fn];
		if (!op)
			throw new Trouble(
				'notAllowed',
				this.#places.line(),
				`\`${String(node.op)}\` is not part of formulas.`,
			);
		const left = this.#any(first);
		const right = this.#any(second);
		if (node.implicit) this.#checkSideBySide(left, right);
		const closed = this.#places.endsInBracket(left);
		const joined = joinUnits(op, left, right, { implicit: node.implicit, closed });
		if (joined) return joined;
		for (const side of [left, right]) if (side.kind === 'unit') throw bareUnit(side);
		return { kind: 'binary', op, left, right, from: left.from, to: right.to };
	}

	#checkSideBySide(left: Node, right: Node): void {
		if (this.#places.at(right.from)?.kind !== 'number') return;
		const between = this.#places.before(right.from);
		if (between?.text === percent) throw remainder({ from: left.from, to: right.to });
		throw new Trouble(
			'syntax',
			{ from: left.from, to: right.to },
			'A number follows without an operator.',
			{
				mend: 'Put an operator, or a comma between the values of a function, before it.',
			},
		);
	}

	#unary(fn: string, argument: M.MathNode): Node {
		if (fn === 'factorial') {
			const value = this.value(argument);
			return { ...this.#places.widened(value, 0, 1), kind: 'unary', op: '!', value };
		}
		const op = ({ unaryMinus: '-', unaryPlus: '+', not: 'not' } as const)[fn];
		if (!op)
			throw new Trouble(
				'notAllowed',
				this.#places.line(),
				'This operator is not part of formulas.',
			);
		const value = this.value(argument);
		const wide = this.#places.widened(value, 1, 0);
		if (op === '-' && value.kind === 'number' && (value.unit?.offset ?? 0) === 0)
			return literal(-value.typed, value.unit, wide);
		return { kind: 'unary', op, value, from: wide.from, to: wide.to };
	}

	#relation({ conditionals, params }: { conditionals: string[]; params: M.MathNode[] }): Node {
		const operands = params.map((param) => this.value(param));
		const ops = conditionals.map((fn) => comparisons[fn] ?? '==');
		return { kind: 'compare', ops, operands, ...span(operands) };
	}

	#choice(node: M.ConditionalNode): Node {
		const condition = this.value(node.condition);
		const yes = this.value(node.trueExpr);
		const no = this.value(node.falseExpr);
		return { kind: 'choice', condition, yes, no, from: condition.from, to: no.to };
	}

	#call(node: M.FunctionNode): Node {
		if ((node.fn as unknown as M.MathNode).type !== 'SymbolNode')
			throw new Trouble('notAllowed', this.#places.line(), 'Only a function can be called.');
		const token = this.#places.leaf(node.fn.name);
		const typed = asTyped(token.text);
		const name = canonical(typed);
		const known = functions.get(name);
		const args = node.args.map((argument, i) =>
			known?.unitAt === i || (name === 'sqrt' && i === 0)
				? this.#any(argument)
				: this.value(argument),
		);
		const end = this.#places.closing(args.at(-1), token);
		const at = { from: token.from, to: end };
		const [only] = args;
		if (name === 'sqrt' && only?.kind === 'unit') {
			if (args.length === 1) return { kind: 'unit', unit: power(only.unit, 0.5), ...at };
			throw bareUnit(only);
		}
		if (!known) this.#refer(name, typed, place(token), true);
		return { kind: 'call', name, typed, nameTo: token.to, args, ...at };
	}

	#array(node: M.ArrayNode): Node {
		const nested = node.items.length > 0 && node.items.every((item) => item.type === 'ArrayNode');
		const rows = nested
			? node.items.map((item) => (item as M.ArrayNode).items.map((member) => this.value(member)))
			: [node.items.map((item) => this.value(item))];
		const members = rows.flat();
		if (members.length === 0)
			throw new Trouble('value', this.#places.line(), 'An empty list has no value.');
		const open = this.#places.openBefore(members[0]?.from ?? 0);
		const at = { from: open, to: this.#places.closeAfter(members.at(-1)?.to ?? 0) };
		return { kind: 'array', rows, flat: !nested, ...at };
	}

	#range(node: M.RangeNode): Node {
		const start = this.value(node.start);
		const step = node.step ? this.value(node.step) : undefined;
		const end = this.value(node.end);
		return { kind: 'range', start, step, end, from: start.from, to: end.to };
	}

	#index(node: M.AccessorNode): Node {
		const object = this.value(node.object);
		const index = node.index as unknown as { dimensions: M.MathNode[]; dotNotation: boolean };
		if (index.dotNotation)
			throw new Trouble('notAllowed', this.#places.line(), 'Quantities have no members.');
		const indexes = index.dimensions.map((part) => this.value(part));
		return {
			kind: 'index',
			object,
			indexes,
			from: object.from,
			to: this.#places.closeAfter(indexes.at(-1)?.to ?? object.to),
		};
	}
}

function place({ from, to }: Place): Place {
	return { from, to };
}

function span(nodes: Node[]): Place {
	return { from: nodes[0]?.from ?? 0, to: nodes.at(-1)?.to ?? 0 };
}

function remainder(at: Place): Trouble {
	return new Trouble('syntax', at, '`%` means percent here, not the remainder.', {
		mend: 'Write `mod(a, b)` for a remainder.',
	});
}
