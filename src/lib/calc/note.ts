import { bounds } from './bounds';
import { check } from './check';
import { isStatement, linesOfStatements, stateCorrelations } from './correlated-lines';
import { circleTrouble, define, doubleReadings } from './definitions';
import type { Doubts } from './doubt/budget';
import { uncorrelated, type Correlations } from './doubt/correlations';
import { TapeBuilder } from './doubt/tape';
import { DoubtfulFunctions, readsUncertainty } from './doubtful-calls';
import { Inputs, labelled } from './inputs';
import { canonical } from './language/characters';
import type { Node, Place, Reference } from './language/nodes';
import { columnValue, type Given } from './given-cells';
import type { Memory, Computed, Remembered } from './memory';
import { Meter } from './meter';
import { misusedNames } from './misused-names';
import { NoteCurves } from './note-curves';
import { whereabouts, type NoteLine, type Watch } from './note-lines';
import { order } from './order';
import { readDoubt } from './read-doubt';
import { run, type Scope } from './run';
import { expectShowable } from './showable';
import { stepsOf, type Step } from './steps';
import { Tracer, type Doubt, type Surroundings } from './trace';
import { isExact, nodesOf, shapeOf } from './traced';
import { Trouble } from './trouble';
import type { Types } from './type-scope';
import type { Type } from './types';
import { Suggestions } from './unknown-names';
import type { Value } from './values';

/** Stands among the names for all that the note says of correlations. */
const statements = '(correlations)';

/** All lines of a note in one name space: finds what each means, whether it stands, its value and its doubt. */
export class Note {
	readonly troubles = new Map<NoteLine, Trouble[]>();
	/** Faults that do not keep a line from being computed. */
	readonly remarks: ReadonlyMap<NoteLine, Trouble>;
	readonly computed = new Map<NoteLine, Computed>();
	readonly remembered = new Map<NoteLine, Remembered>();
	readonly inputs = new Inputs();
	readonly suggestions: Suggestions;
	readonly #definitions: ReadonlyMap<string, NoteLine>;
	readonly #meter = new Meter();
	/** For each waiting line the one whose error it waits for. `V = A` and `A = V` wait for one another. */
	readonly #awaited = new Map<NoteLine, NoteLine>();
	readonly #functionTokens = new Map<NoteLine, object>();
	readonly curves: NoteCurves;
	readonly #doubtfulFunctions: DoubtfulFunctions;
	#correlations: Correlations = uncorrelated;
	#curvaturesLeft: number;
	/** Of the line that was computed last. */
	#lastSecondOrder = { curvatures: 0, secondOrder: true };

	constructor(
		readonly lines: readonly NoteLine[],
		private readonly watch: Watch,
		readonly memory: Memory,
		private readonly secondOrder = true,
	) {
		memory.begin();
		this.#curvaturesLeft = secondOrder ? bounds.curvatures : -1;
		const names = new Set(lines.flatMap((line) => (line.defined ? [line.defined.name] : [])));
		const fail = (line: NoteLine, trouble: Trouble) => this.fail(line, trouble);
		this.#definitions = define(lines, names, fail);
		this.remarks = doubleReadings(lines, this.#definitions, names);
		const known = [...this.#definitions.values()].map((line) => line.defined?.typed ?? '');
		this.suggestions = new Suggestions(known);
		this.#doubtfulFunctions = new DoubtfulFunctions(
			(name) => this.#definitions.get(name),
			(name) => this.#doubt(name) !== undefined,
		);
		this.curves = new NoteCurves((name) => this.#definitions.get(name), this.inputs, memory);
		this.#evaluateAll();
	}

	/** Operations that computing it took. */
	get spent(): number {
		return this.#meter.total;
	}

	/** What the note says of correlations between its inputs. */
	get correlations(): Correlations {
		return this.#correlations;
	}

	get doubts(): Doubts {
		const { uncertainties, dofs } = this.inputs;
		return { uncertainties, dofs, correlations: this.#correlations };
	}

	/** Lines in an order in which each comes behind those it uses; what the note says of correlations is one of them. */
	#evaluateAll(): void {
		const stating = linesOfStatements(this.lines);
		const curves = this.lines.filter((line) => line.given?.kind === 'curve');
		const correlated = stating.length > 0 || curves.length > 0;
		const names = [...this.#definitions.keys(), ...(correlated ? [statements] : [])];
		const uses = new Map(
			[...this.#definitions].map(([name, line]) => {
				const asks = line.body && correlated && readsUncertainty(line.body);
				return [name, [...this.#usedBy(line), ...(asks ? [statements] : [])]];
			}),
		);
		const before = stating.flatMap((line) => this.#usedBy(line));
		const fitted = curves.flatMap((line) => line.defined?.name ?? []);
		uses.set(statements, [...new Set([...before, ...fitted])]);
		const { sorted, circles } = order(names, (name) => uses.get(name) ?? []);
		for (const [name, circle] of circles) {
			const trouble = circleTrouble(circle, this.#definitions);
			const line = this.#definitions.get(name);
			if (trouble && line) this.fail(line, trouble);
		}
		for (const name of sorted) {
			const line = this.#definitions.get(name);
			if (line) this.#evaluate(line, circles.has(name));
			else this.#state(stating);
		}
		for (const line of this.lines)
			if (this.#definitions.get(line.defined?.name ?? '') !== line && !isStatement(line))
				this.#evaluate(line);
	}

	#state(lines: readonly NoteLine[]): void {
		for (const line of lines) this.#evaluate(line);
		const stated = lines.filter((line) => !this.#broken(line) && line.body);
		const used = stated.flatMap((line) => [line.body, ...this.#usesOf(line)]);
		const correlations = stateCorrelations(
			stated,
			{
				computed: (name) => this.computed.get(this.#definitions.get(name)!),
				coefficient: (node) => Number(run(node, this.#scope)),
				fail: (line, trouble) => this.fail(line, trouble),
			},
			this.curves.pairs,
		);
		const curves = [...this.curves.fitted.values()];
		this.#correlations = this.memory.correlations([...used, ...curves], correlations);
	}

	/** The line that defines a name, the first where there are several. */
	definition(name: string): NoteLine | undefined {
		return this.#definitions.get(name);
	}

	/** The computed quantity of a name as it is typed. */
	find(typed: string): Computed | undefined {
		const line = this.#definitions.get(canonical(typed));
		return line?.kind === 'definition' ? this.computed.get(line) : undefined;
	}

	/** Why a use of a defined name has no value: it, or what it waits for, has an error. */
	waiting(typed: string, line: NoteLine, at: Place): Trouble {
		const root = this.#root(line);
		const names = root.defined?.typed ?? 'a line';
		const through = root === line ? '' : `, through \`${typed}\`,`;
		return new Trouble(
			'waits',
			at,
			`Waits${through} for \`${names}\` (${whereabouts(root)}), which has an error.`,
		);
	}

	/** Sides of a comparison as numbers with their types. Throws Trouble. */
	measure(node: Node): { value: number; type: Type } {
		this.#startLine();
		const type = check(node, this.#types);
		const value = run(node, this.#scope);
		if (typeof value !== 'number' || type.kind !== 'number')
			throw new Trouble('notComparable', node, 'A requirement compares single numbers.');
		return { value, type };
	}

	/** The step of an expression of a requirement, undefined where it is exact. Throws Trouble. */
	traced(line: NoteLine, nodes: readonly Node[]): (Step | undefined)[] {
		this.#startLine();
		const tracer = this.#tracer(line);
		const parts = nodes.map((node) => tracer.trace(node));
		const first = this.inputs.add(tracer.inputs);
		return parts.map((part) => {
			if (isExact(part)) return undefined;
			const count = tracer.inputs.length;
			const out = nodesOf(tracer.tape, part);
			const { tape, args } = tracer;
			return stepsOf(tape, out, args, first, this.inputs, count, this.secondOrder)[0];
		});
	}

	faultsOf(line: NoteLine): Trouble[] {
		const remark = this.remarks.get(line);
		const troubles = this.troubles.get(line) ?? [];
		// What keeps a curve from being fitted is told once, not for its inverse again.
		const inverse = line.given?.kind === 'curve' && line.given.inverse;
		const told = inverse
			? troubles.filter(({ code }) => code === 'duplicate' || code === 'reserved')
			: troubles;
		return [...told, ...(remark ? [remark] : [])];
	}

	fail(line: NoteLine, trouble: Trouble): void {
		this.troubles.set(line, [...(this.troubles.get(line) ?? []), trouble]);
	}

	#usedBy(line: NoteLine): string[] {
		return line.references
			.map((reference) => reference.name)
			.filter((name) => this.#definitions.has(name));
	}

	/** The line at the bottom of a chain of waiting lines. */
	#root(line: NoteLine): NoteLine {
		const seen = new Set<NoteLine>();
		let at = line;
		for (let next = this.#awaited.get(at); next && !seen.has(next); next = this.#awaited.get(at)) {
			seen.add(next);
			at = next;
		}
		return at;
	}

	#startLine(): void {
		this.#meter.startLine();
		this.#types.budget.calls = bounds.checkedCalls;
	}

	#broken(line: NoteLine): boolean {
		return this.troubles.has(line);
	}

	#evaluate(line: NoteLine, onCircle = false): void {
		if (line.kind === 'blank' || line.kind === 'comment') return;
		if (line.given) return this.#give(line, line.given);
		if (line.trouble) {
			const unit = line.trouble.how.unitName;
			const meant = unit === undefined ? undefined : this.#definitions.get(unit);
			if (meant && meant !== line) this.#awaited.set(line, meant);
			const waits = meant && unit !== undefined && this.waiting(unit, meant, line.trouble.at);
			// `V = V`: that the name is not free is all there is to say.
			if (meant !== line) this.fail(line, waits || line.trouble);
		}
		if (!line.body || this.#broken(line)) return;
		const uses = this.#usesOf(line);
		const known = this.memory.recall(line.body, uses, this.inputs.next);
		const affords = known && this.#curvaturesLeft >= known.curvatures;
		if (known && this.#meter.affords(known.spent) && affords === known.secondOrder) {
			this.#meter.charge(known.spent);
			this.#curvaturesLeft -= known.curvatures;
			this.#keep(line, line.body, known);
			return;
		}
		if (!line.quick) this.watch.at?.(line.cell, line.line);
		this.#startLine();
		const firstInput = this.inputs.next;
		try {
			const computed = this.#compute(line, line.body);
			if (line.kind === 'function') {
				const token = onCircle ? {} : this.memory.functionToken(line.body, uses);
				this.#functionTokens.set(line, token);
			}
			if (computed)
				this.#keep(line, line.body, {
					uses,
					firstInput,
					spent: this.#meter.spent,
					...this.#lastSecondOrder,
					computed,
				});
		} catch (error) {
			if (error instanceof Trouble) this.fail(line, error);
			else if (error instanceof RangeError)
				this.fail(
					line,
					new Trouble('tooDeep', line.body, 'Nested too deeply.', {
						mend: 'Split the line into several quantities.',
					}),
				);
			else throw error;
		}
	}

	/** Takes what a cell without formulas gives: the values of a column, or a curve. */
	#give(line: NoteLine, given: Given): void {
		if (line.trouble) this.fail(line, line.trouble);
		if (this.#broken(line)) return;
		try {
			const [waiting] = misusedNames(line, { ...this.#names, suggestions: this.suggestions });
			if (waiting) throw waiting;
			if (given.kind === 'curve') {
				this.#functionTokens.set(line, this.curves.take(line, given));
				return;
			}
			const firstInput = this.inputs.next;
			const computed = { ...columnValue(given), inputs: [], firstInput };
			const nothing = { spent: 0, curvatures: 0, secondOrder: true };
			this.#keep(line, undefined, { uses: [], firstInput, ...nothing, computed });
		} catch (error) {
			if (!(error instanceof Trouble)) throw error;
			this.fail(line, error);
		}
	}

	#keep(line: NoteLine, body: Node | undefined, remembered: Remembered): void {
		const { computed } = remembered;
		// Remembered inputs take the numbers that they had: recall has seen to it that these are the next ones.
		if (computed.inputs.length > 0 && computed.firstInput === this.inputs.next)
			this.inputs.add(computed.inputs);
		const name = line.kind === 'definition' ? line.defined?.name : undefined;
		const kept = this.memory.settled(name, remembered);
		this.memory.keep(body, name, kept);
		this.computed.set(line, kept.computed);
		this.remembered.set(line, kept);
	}

	/** Value and doubt of a line; undefined for a function, which has none before it is called. */
	#compute(line: NoteLine, body: Node): Computed | undefined {
		const unknowns = misusedNames(line, { ...this.#names, suggestions: this.suggestions });
		const type = check(body, this.#types);
		const [first] = unknowns;
		if (first) {
			const awaited = line.references.map(({ name }) => this.#definitions.get(name));
			const used = awaited.find((other) => other && this.#broken(other));
			if (first.code === 'waits' && used) this.#awaited.set(line, used);
			throw first;
		}
		if (line.kind === 'function') return undefined;
		const value = run(body, this.#scope);
		if (type.kind === 'series')
			throw new Trouble('value', body, 'A series is not a value.', {
				mend: 'Write `preferred(x, E24)`.',
			});
		if (type.kind === 'unknown' || (type.kind === 'number' && !type.dimension))
			throw new Trouble(
				'dimension',
				body,
				'The unit of this cannot be told before it is computed.',
				{
					mend: 'Write exponents as numbers.',
				},
			);
		expectShowable(value, type, body);
		return { type, value, ...this.#doubtOf(line, body, value) };
	}

	/** How a line depends on inputs, and the inputs it states itself. */
	#doubtOf(
		line: NoteLine,
		body: Node,
		value: Value,
	): Pick<Computed, 'doubt' | 'inputs' | 'firstInput'> {
		const firstInput = this.inputs.next;
		const exact = { inputs: [], firstInput };
		this.#lastSecondOrder = { curvatures: 0, secondOrder: this.#curvaturesLeft >= 0 };
		// Of a requirement the sides are followed, when it is judged.
		if (typeof value === 'string' || line.requirement) return exact;
		const tracer = this.#tracer(line);
		if (!tracer.isDoubtful(body, tracer.outer)) return exact;
		const traced = tracer.trace(body);
		if (isExact(traced)) return exact;
		const { tape, args } = tracer;
		const inputs = labelled(tracer.inputs);
		this.inputs.add(inputs);
		const nodes = nodesOf(tape, traced);
		const secondOrder = this.#chargeSecondOrder(args, inputs.length, nodes.length);
		const steps = stepsOf(tape, nodes, args, firstInput, this.inputs, inputs.length, secondOrder);
		const shape = shapeOf(traced);
		return { doubt: { steps, ...(shape && { shape }) }, inputs, firstInput };
	}

	/** Whether the second derivatives of a line's numbers are still within those of a note. */
	#chargeSecondOrder(args: readonly Step[], inputs: number, numbers: number): boolean {
		const most = args.reduce((n, { propagated }) => Math.max(n, propagated.support.length), 0);
		const curvatures = numbers * (most + inputs) ** 2;
		const secondOrder = this.#curvaturesLeft >= curvatures;
		this.#lastSecondOrder = { curvatures, secondOrder };
		this.#curvaturesLeft -= curvatures;
		return secondOrder;
	}

	#tracer(line: NoteLine): Tracer {
		const name = line.requirement ? undefined : line.defined?.typed;
		return new Tracer(
			this.#surroundings,
			new TapeBuilder(),
			({ from, to }) => name ?? line.text.slice(from, to),
		);
	}

	/** The doubt of a quantity, undefined for exact ones. */
	#doubt(name: string): Doubt | undefined {
		return this.computed.get(this.#definitions.get(name)!)?.doubt;
	}

	/** What a line is computed from, each the same object as long as it stays the same. */
	#usesOf(line: NoteLine): unknown[] {
		const uses: unknown[] = line.references.map(({ name }) => {
			const used = this.#definitions.get(name);
			return used && (this.#functionTokens.get(used) ?? this.computed.get(used));
		});
		if (line.body && readsUncertainty(line.body)) uses.push(this.#correlations);
		return uses;
	}

	readonly #names = {
		definition: (name: string) => this.#definitions.get(name),
		waiting: (reference: Reference, used: NoteLine) =>
			this.#broken(used) ? this.waiting(reference.typed, used, reference) : undefined,
	};

	readonly #types: Types = {
		of: (name) => this.computed.get(this.#definitions.get(name)!)?.type,
		function: (name) => this.#function(name),
		constant: (node) => this.#constant(node),
		calls: new Map(),
		budget: { calls: bounds.checkedCalls, pending: 0 },
	};

	readonly #scope: Scope = {
		of: (name) => this.computed.get(this.#definitions.get(name)!)?.value,
		function: (name) => this.#function(name),
		read: (what, node) => readDoubt(what, node, this.#surroundings, this),
		meter: this.#meter,
		depth: 0,
		levels: 0,
	};

	readonly #surroundings: Surroundings = {
		scope: this.#scope,
		types: this.#types,
		doubt: (name) => this.#doubt(name),
		isDoubtful: (name) => this.#doubtfulFunctions.has(name),
	};

	#function(name: string): NoteLine | undefined {
		const line = this.#definitions.get(name);
		return line?.kind === 'function' && !this.#broken(line) ? line : undefined;
	}

	#constant(node: Node): number | undefined {
		if (node.kind === 'number') return node.value;
		try {
			const value = run(node, { ...this.#scope, depth: bounds.calls });
			return typeof value === 'number' ? value : undefined;
		} catch (error) {
			if (error instanceof Trouble && error.code !== 'tooLong') return undefined;
			throw error;
		}
	}
}
