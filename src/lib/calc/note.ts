import { bounds } from './bounds';
import { check } from './check';
import type { Node, Place } from './language/nodes';
import { circleTrouble, define, doubleReadings } from './definitions';
import { Suggestions, unknownName } from './unknown-names';
import { Meter } from './meter';
import { whereabouts, type NoteLine, type Watch } from './note-lines';
import { order } from './order';
import { run, type Scope } from './run';
import { Trouble } from './trouble';
import type { Types } from './type-scope';
import type { Type } from './types';
import type { Value } from './values';

/** A line that was computed. */
export interface Computed {
	type: Type;
	value: Value;
}

/** All lines of a note in one name space: finds what each means, whether it stands, and its value. */
export class Note {
	readonly troubles = new Map<NoteLine, Trouble[]>();
	/** Faults that do not keep a line from being computed. */
	readonly remarks: ReadonlyMap<NoteLine, Trouble>;
	readonly computed = new Map<NoteLine, Computed>();
	readonly #definitions: ReadonlyMap<string, NoteLine>;
	readonly #meter = new Meter();
	/** For each waiting line the one whose error it waits for. `V = A` and `A = V` wait for one another. */
	readonly #awaited = new Map<NoteLine, NoteLine>();
	readonly suggestions: Suggestions;

	constructor(
		readonly lines: readonly NoteLine[],
		private readonly watch: Watch,
	) {
		const names = new Set(lines.flatMap((line) => (line.defined ? [line.defined.name] : [])));
		const fail = (line: NoteLine, trouble: Trouble) => this.fail(line, trouble);
		this.#definitions = define(lines, names, fail);
		this.remarks = doubleReadings(lines, this.#definitions, names);
		const known = [...this.#definitions.values()].map((line) => line.defined?.typed ?? '');
		this.suggestions = new Suggestions(known);
		const uses = new Map([...this.#definitions].map(([name, line]) => [name, this.#usedBy(line)]));
		const { sorted, circles } = order(this.#definitions.keys(), (name) => uses.get(name) ?? []);
		for (const [name, circle] of circles) {
			const trouble = circleTrouble(circle, this.#definitions);
			if (trouble) this.fail(this.#definitions.get(name)!, trouble);
		}
		for (const name of sorted) this.#evaluate(this.#definitions.get(name)!);
		for (const line of lines)
			if (this.#definitions.get(line.defined?.name ?? '') !== line) this.#evaluate(line);
	}

	/** The line that defines a name, the first where there are several. */
	definition(name: string): NoteLine | undefined {
		return this.#definitions.get(name);
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

	/** One side of a comparison that was computed, as a number. Throws Trouble. */
	measure(node: Node): { value: number; type: Type } {
		this.#startLine();
		const type = check(node, this.#types);
		const value = run(node, this.#scope);
		if (typeof value !== 'number' || type.kind !== 'number')
			throw new Trouble('notComparable', node, 'A requirement compares single numbers.');
		return { value, type };
	}

	faultsOf(line: NoteLine): Trouble[] {
		const remark = this.remarks.get(line);
		return [...(this.troubles.get(line) ?? []), ...(remark ? [remark] : [])];
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

	#evaluate(line: NoteLine): void {
		if (line.kind === 'blank' || line.kind === 'comment') return;
		if (line.trouble) {
			const unit = line.trouble.how.unitName;
			const meant = unit === undefined ? undefined : this.#definitions.get(unit);
			if (meant && meant !== line) this.#awaited.set(line, meant);
			const waits = meant && unit !== undefined && this.waiting(unit, meant, line.trouble.at);
			// `V = V`: that the name is not free is all there is to say.
			if (meant !== line) this.fail(line, waits || line.trouble);
		}
		if (!line.body || this.#broken(line)) return;
		this.watch.at?.(line.cell, line.line);
		this.#startLine();
		try {
			const unknowns = this.#unresolved(line);
			const type = check(line.body, this.#types);
			const [first] = unknowns;
			if (first) {
				const awaited = line.references.map(({ name }) => this.#definitions.get(name));
				const used = awaited.find((other) => other && this.#broken(other));
				if (first.code === 'waits' && used) this.#awaited.set(line, used);
				throw first;
			}
			if (line.kind === 'function') return;
			const value = run(line.body, this.#scope);
			if (type.kind === 'series')
				throw new Trouble('value', line.body, 'A series is not a value.', {
					mend: 'Write `preferred(x, E24)`.',
				});
			if (type.kind === 'unknown' || (type.kind === 'number' && !type.dimension))
				throw new Trouble(
					'dimension',
					line.body,
					'The unit of this cannot be told before it is computed.',
					{
						mend: 'Write exponents as numbers.',
					},
				);
			this.computed.set(line, { type, value });
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

	/** Names of the line that are unknown, wrongly used, or wait; in order of first use. */
	#unresolved(line: NoteLine): Trouble[] {
		const found: Trouble[] = [];
		for (const reference of line.references) {
			const used = this.#definitions.get(reference.name);
			if (!used) found.push(unknownName(reference, line, this.suggestions));
			else if (this.#broken(used)) found.push(this.waiting(reference.typed, used, reference));
			else if (reference.called && used.kind !== 'function')
				found.push(
					new Trouble(
						'syntax',
						reference,
						`\`${reference.typed}\` is a quantity, not a function.`,
						{
							mend: `Write \`${reference.typed} * (…)\` for a product.`,
							replacement: `${reference.typed} *`,
						},
					),
				);
			else if (!reference.called && used.kind === 'function')
				found.push(
					new Trouble(
						'syntax',
						reference,
						`\`${reference.typed}\` is a function and needs its values in brackets.`,
					),
				);
		}
		return found.sort((a, b) => rank(a) - rank(b));
	}

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
		meter: this.#meter,
		depth: 0,
		levels: 0,
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

/** What to tell first: what is wrong here before what waits for something else. */
function rank(trouble: Trouble): number {
	return trouble.code === 'waits' ? 1 : 0;
}
