import { check } from './check';
import type { Node as TapeNode, TapeBuilder } from './doubt/tape';
import { isExact, mapNodes, nodesOf, shapeOf, type Traced } from './traced';
import { traceCall } from './trace-calls';
import { choose, compare, join, operate } from './trace-operators';
import { partsOf, type Node, type NodeOf, type Place } from './language/nodes';
import type { Input } from './inputs';
import { functions } from './functions/registry';
import { pick } from './grids';
import { run, type Scope } from './run';
import type { Step } from './steps';
import { Trouble } from './trouble';
import type { Types } from './type-scope';
import { toSI } from './units/unit';
import { isGrid, type Value } from './values';

/** A quantity in doubt as other lines use it: a step, or one for each member of a list. */
export interface Doubt {
	readonly steps: readonly Step[];
	readonly shape?: readonly number[];
}

/** What a tracer learns of the note. */
export interface Surroundings {
	readonly scope: Scope;
	readonly types: Types;
	/** Undefined for exact quantities. */
	doubt(name: string): Doubt | undefined;
	/** Whether a function of the note states or uses something in doubt, whatever it is called with. */
	isDoubtful(name: string): boolean;
}

/** What names stand for: in the line itself, or inside a function that it calls. */
export interface Frame {
	readonly scope: Scope;
	readonly types: Types;
	/** Values of a function's parameters; those that are not here are the note's. */
	readonly bound: ReadonlyMap<string, Traced>;
}

/** Operations of a tape; a line that needs more is refused. */
const most = 20_000;

/**
 * Puts an expression in doubt on a tape. What is exact in it is computed; quantities in doubt become arguments, calls
 * that state an input become inputs of the line.
 */
export class Tracer {
	readonly args: Step[] = [];
	readonly inputs: Input[] = [];
	readonly outer: Frame;
	readonly #numbers = new Map<Step, number>();
	#size = 0;

	constructor(
		readonly note: Surroundings,
		readonly tape: TapeBuilder,
		/** How the inputs of the line are called. */
		readonly label: (place: Place, index: number) => string,
	) {
		this.outer = { scope: note.scope, types: note.types, bound: new Map() };
	}

	/** Throws Trouble. */
	trace(node: Node, frame: Frame = this.outer): Traced {
		this.#spend(node);
		if (!this.isDoubtful(node, frame)) return { exact: run(node, frame.scope) };
		switch (node.kind) {
			case 'name':
				return frame.bound.get(node.name) ?? this.#quantity(node.name);
			case 'unary':
				return this.#unary(node, frame);
			case 'binary': {
				const left = this.trace(node.left, frame);
				const right = this.trace(node.right, frame);
				return this.charged(operate(this.tape, node, left, right), node);
			}
			case 'compare':
				return compare(
					this.tape,
					node,
					node.operands.map((operand) => this.trace(operand, frame)),
				);
			case 'choice':
				return this.#choice(node, frame);
			case 'call':
				return this.charged(traceCall(this, node, frame), node);
			case 'array':
				return this.#array(node, frame);
			case 'index':
				return this.#index(node, frame);
			case 'convert':
				return this.#convert(node, frame);
			default:
				throw exactOnly(node, 'A range counts in exact steps');
		}
	}

	/** Whether an expression depends on something in doubt. */
	isDoubtful(node: Node, frame: Frame): boolean {
		switch (node.kind) {
			case 'number':
			case 'unit':
			case 'series':
			case 'boolean':
				return false;
			case 'name': {
				const bound = frame.bound.get(node.name);
				return bound ? !isExact(bound) : this.note.doubt(node.name) !== undefined;
			}
			case 'call': {
				const known = functions.get(node.name);
				if (known?.states || known?.restates) return true;
				if (known?.ofEstimate || known?.reads) return false;
				if (!known && this.note.isDoubtful(node.name)) return true;
				return node.args.some((argument) => this.isDoubtful(argument, frame));
			}
			default:
				return partsOf(node).some((part) => this.isDoubtful(part, frame));
		}
	}

	/** The node of a quantity's number. */
	argument(step: Step): TapeNode {
		let number = this.#numbers.get(step);
		if (number === undefined) {
			number = this.args.push(step) - 1;
			this.#numbers.set(step, number);
		}
		return this.tape.argument(number);
	}

	/** The node of a new input's deviation. */
	input(input: Omit<Input, 'label'>, place: Place): TapeNode {
		const number = this.inputs.length;
		this.inputs.push({ ...input, label: this.label(place, number) });
		return this.tape.input(number);
	}

	/** Type of an expression where it stands. */
	typeOf(node: Node, frame: Frame) {
		return check(node, frame.types);
	}

	charged(traced: Traced, at: Place): Traced {
		this.#size += 'nodes' in traced ? traced.nodes.length : 1;
		this.#spend(at);
		return traced;
	}

	#spend(at: Place): void {
		this.note.scope.meter.spend(1, at);
		if (++this.#size > most)
			throw new Trouble('tooLarge', at, 'This is too large for its uncertainty to be followed.', {
				mend: 'Take the plain value, `value(x)`, of what need not be in doubt.',
			});
	}

	#quantity(name: string): Traced {
		const doubt = this.note.doubt(name)!;
		const nodes = doubt.steps.map((step) => this.argument(step));
		return doubt.shape ? { shape: doubt.shape, nodes } : { node: nodes[0]! };
	}

	#unary(node: NodeOf<'unary'>, frame: Frame): Traced {
		const value = this.trace(node.value, frame);
		if (node.op === '+') return value;
		if (node.op === '-') return mapNodes(this.tape, value, (x) => this.tape.unary('neg', x));
		if (node.op === 'not')
			return mapNodes(this.tape, value, (x) => this.tape.binary('sub', this.tape.constant(1), x));
		throw exactOnly(node, 'A factorial is taken of an exact number');
	}

	/** Both cases stand on the tape where the condition is in doubt; one that cannot be computed counts as no number. */
	#choice(node: NodeOf<'choice'>, frame: Frame): Traced {
		const condition = this.trace(node.condition, frame);
		if (isExact(condition)) return this.trace(condition.exact === true ? node.yes : node.no, frame);
		const taken = run(node.condition, frame.scope) === true;
		const kept = this.trace(taken ? node.yes : node.no, frame);
		let other: Traced;
		try {
			other = this.trace(taken ? node.no : node.yes, frame);
		} catch (error) {
			if (!(error instanceof Trouble) || error.code === 'tooLarge') throw error;
			other = mapNodes(this.tape, kept, () => this.tape.constant(NaN));
		}
		const [yes, no] = taken ? [kept, other] : [other, kept];
		return choose(this.tape, nodesOf(this.tape, condition)[0]!, yes, no, node);
	}

	#array(node: NodeOf<'array'>, frame: Frame): Traced {
		const rows = node.rows.map((row) => row.map((item) => this.trace(item, frame)));
		const columns = rows[0]?.length ?? 0;
		if (rows.some((row) => row.length !== columns))
			throw new Trouble('value', node, 'The rows of this matrix differ in length.');
		const shape = node.flat ? [columns] : [rows.length, columns];
		return { shape, nodes: rows.flat().map((item) => join(this.tape, item, node)) };
	}

	#index(node: NodeOf<'index'>, frame: Frame): Traced {
		const object = this.trace(node.object, frame);
		const shape = shapeOf(object);
		if (!shape) throw new Trouble('value', node, 'Only a list has places.');
		const places = node.indexes.map((index): Value => {
			if (this.isDoubtful(index, frame)) throw exactOnly(index, 'A place in a list is exact');
			return run(index, frame.scope);
		});
		const nodes = nodesOf(this.tape, object);
		// The places themselves are picked, so that the rules of lists hold for nodes too.
		const chosen = pick({ shape, data: Float64Array.from(nodes) }, places);
		if (isGrid(chosen)) return { shape: chosen.shape, nodes: [...chosen.data] };
		return { node: Number(chosen) };
	}

	#convert(node: NodeOf<'convert'>, frame: Frame): Traced {
		const value = this.trace(node.value, frame);
		if (!node.scaled) return value;
		const { tape } = this;
		const zero = toSI(0, node.unit);
		const size = tape.constant(toSI(1, node.unit) - zero);
		return mapNodes(tape, value, (x) =>
			tape.binary('add', tape.binary('mul', x, size), tape.constant(zero)),
		);
	}
}

/** The fault of something in doubt where only exact values can stand. */
export function exactOnly(at: Place, what: string): Trouble {
	return new Trouble('value', at, `${what}, and this is in doubt.`, {
		mend: 'Take its plain value, `value(x)`.',
	});
}
