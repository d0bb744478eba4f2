import { factorial, finite, holds, operate } from './arithmetic';
import { bounds } from './bounds';
import { Refusal, type CalcFunction } from './functions/function';
import { functions } from './functions/registry';
import { pick, product, productSteps, range, steps, TooLarge, zip } from './grids';
import type { ParsedLine } from './language/parse-line';
import type { Node, NodeOf, Place } from './language/nodes';
import type { Meter } from './meter';
import { Trouble } from './trouble';
import { toSI } from './units/unit';
import { isGrid, map, type Grid, type Value } from './values';

/** What an expression is computed from. */
export interface Scope {
	of(name: string): Value | undefined;
	function(name: string): ParsedLine | undefined;
	readonly meter: Meter;
	/** Function calls around this one, and how many levels of formulas they stand on. */
	readonly depth: number;
	readonly levels: number;
	/** The doubt of an expression: its uncertainty or a bound, in SI units. Only where a line of the note asks. */
	readonly read?: (what: 'uncertainty' | 'lower' | 'upper', node: Node) => number;
	/** The note, seen from inside a function: it knows its parameters and the note, not what its caller bound. */
	readonly note?: Scope;
}

/** What a function computes from: the values it was called with. */
export class Frame implements Scope {
	readonly note: Scope;
	readonly meter: Meter;
	readonly depth: number;
	readonly levels: number;

	constructor(
		caller: Scope,
		private readonly own: ParsedLine,
		private readonly values: Value[],
	) {
		this.note = caller.note ?? caller;
		this.meter = caller.meter;
		this.depth = caller.depth + 1;
		this.levels = caller.levels + own.height;
	}

	of(name: string): Value | undefined {
		const { parameters } = this.own;
		for (let i = 0; i < parameters.length; i++)
			if (parameters[i]?.name === name) return this.values[i];
		return this.note.of(name);
	}

	function(name: string): ParsedLine | undefined {
		return this.note.function(name);
	}
}

/** Computes a checked expression in SI units. Throws Trouble. */
export function run(node: Node, scope: Scope): Value {
	scope.meter.spend(1, node);
	switch (node.kind) {
		case 'number':
			return node.value;
		case 'unit':
			return toSI(1, node.unit);
		case 'name': {
			const value = scope.of(node.name);
			if (value === undefined) throw new Trouble('waits', node, `Waits for \`${node.typed}\`.`);
			return value;
		}
		case 'series':
			return node.name;
		case 'boolean':
		case 'text':
			return node.value;
		case 'unary':
			return runUnary(node, scope);
		case 'binary':
			return runBinary(node, scope);
		case 'compare':
			return runComparison(node, scope);
		case 'choice': {
			const condition = run(node.condition, scope);
			return run(condition === true ? node.yes : node.no, scope);
		}
		case 'call':
			return runCall(node, scope);
		case 'array':
			return runArray(node, scope);
		case 'range': {
			const [start, step, end] = [node.start, node.step, node.end].map((part) =>
				part ? one(run(part, scope), part) : 1,
			);
			return charged(node, () => range(start ?? 0, step ?? 1, end ?? 0), scope);
		}
		case 'index': {
			const object = run(node.object, scope);
			if (!isGrid(object)) throw new Trouble('value', node, 'Only a list has places.');
			const places = node.indexes.map((index) => run(index, scope));
			return charged(node, () => pick(object, places), scope);
		}
		case 'convert': {
			const value = run(node.value, scope);
			if (!node.scaled) return value;
			scope.meter.spend(steps(value), node);
			return finite(
				map(value, (x) => toSI(x, node.unit)),
				node,
			);
		}
	}
}

function runUnary(node: NodeOf<'unary'>, scope: Scope): Value {
	const value = run(node.value, scope);
	scope.meter.spend(steps(value), node);
	switch (node.op) {
		case 'not':
			return value !== true;
		case '+':
			return value;
		case '-':
			return map(value, (x) => -x);
		case '!':
			return finite(map(value, factorial), node, 'The factorial');
	}
}

function runBinary(node: NodeOf<'binary'>, scope: Scope): Value {
	const left = run(node.left, scope);
	if (node.op === 'and' && left === false) return false;
	if (node.op === 'or' && left === true) return true;
	const right = run(node.right, scope);
	if (typeof left === 'number' && typeof right === 'number')
		return finite(operate(node.op, left, right), node, undefined, node.op, right);
	if (node.op === 'and' || node.op === 'or') return right;
	if (node.op === 'xor') return left !== right;
	const cost = node.op === '*' ? productSteps(left, right) : Math.max(steps(left), steps(right));
	scope.meter.spend(cost, node);
	const value = guarded(
		node,
		() =>
			node.op === '*' ? product(left, right) : zip(left, right, (x, y) => operate(node.op, x, y)),
		scope,
	);
	return finite(value, node, undefined, node.op, right);
}

function runComparison(node: NodeOf<'compare'>, scope: Scope): Value {
	const values = node.operands.map((operand) => {
		const value = run(operand, scope);
		return typeof value === 'boolean' ? Number(value) : one(value, operand);
	});
	return node.ops.every((op, i) => holds(op, values[i] ?? NaN, values[i + 1] ?? NaN));
}

function runArray(node: NodeOf<'array'>, scope: Scope): Grid {
	const rows = node.rows.map((row) => row.map((item) => one(run(item, scope), item)));
	const columns = rows[0]?.length ?? 0;
	if (rows.some((row) => row.length !== columns))
		throw new Trouble('value', node, 'The rows of this matrix differ in length.');
	const data = Float64Array.from(rows.flat());
	return { shape: node.flat ? [columns] : [rows.length, columns], data };
}

function runCall(node: NodeOf<'call'>, scope: Scope): Value {
	const own = scope.function(node.name);
	const known = functions.get(node.name) ?? own?.curve?.fn;
	if (known?.reads) return readDoubt(node, known.reads, scope);
	const args = node.args.map((argument) => run(argument, scope));
	if (known) {
		scope.meter.spend(
			args.reduce<number>((sum, value) => sum + steps(value), known.cost?.(args) ?? 0),
			node,
		);
		return finite(
			guarded(node, () => known.compute(args), scope),
			node,
			`\`${node.typed}\``,
		);
	}
	if (!own?.body) throw new Trouble('waits', node, `Waits for \`${node.typed}\`.`);
	if (scope.depth >= bounds.calls || scope.levels > bounds.levels)
		throw new Trouble(
			'tooDeep',
			node,
			`The calls of \`${node.typed}\` stand too deeply in one another.`,
			{
				mend: 'Give it a case that ends: `f(n) = n <= 1 ? 1 : n * f(n - 1)`.',
			},
		);
	try {
		return run(own.body, new Frame(scope, own, args));
	} catch (error) {
		// Columns inside a function are those of its own line; the caller is told where it called.
		if (error instanceof Trouble && scope.depth === 0)
			throw new Trouble(error.code, node, error.message, error.how);
		throw error;
	}
}

function readDoubt(
	node: NodeOf<'call'>,
	what: NonNullable<CalcFunction['reads']>,
	scope: Scope,
): Value {
	const [argument] = node.args;
	if (scope.note || !scope.read || !argument)
		throw new Trouble('notAllowed', node, `\`${node.typed}\` cannot be used inside a function.`, {
			mend: 'Give it a line of its own, and the function its result.',
		});
	return scope.read(what, argument);
}

/** The fault that a function's refusal is, at its call. */
export function tell(refusal: Refusal, at: Place): Trouble {
	const mend = refusal.mend === undefined ? {} : { mend: refusal.mend };
	return new Trouble('value', at, refusal.message, mend);
}

function one(value: Value, at: Place): number {
	if (isGrid(value)) throw new Trouble('value', at, 'One number is expected here, not a list.');
	return Number(value);
}

function charged(at: Place, compute: () => Value, scope: Scope): Value {
	const value = guarded(at, compute, scope);
	scope.meter.spend(steps(value), at);
	return value;
}

function guarded<T>(at: Place, compute: () => T, scope: Scope): T {
	try {
		return compute();
	} catch (error) {
		if (error instanceof Refusal) throw tell(error, at);
		if (error instanceof TooLarge) {
			scope.meter.spend(0, at);
			throw new Trouble(
				'tooLarge',
				at,
				`This makes ${error.count.toExponential(1)} values; ${bounds.members} are possible.`,
				{
					mend: 'Work on fewer values.',
				},
			);
		}
		throw error;
	}
}
