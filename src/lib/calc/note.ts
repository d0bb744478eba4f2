import { bounds } from './bounds';
import { check, type Types } from './check';
import type { Node, Place } from './language/nodes';
import { builtInNames, nearest, unitNames, whyReserved } from './language/names';
import { findSymbol, spokenName } from './units/table';
import { Meter } from './meter';
import { whereabouts, type NoteLine, type Watch } from './note-lines';
import { leftOut, order } from './order';
import { run, type Scope } from './run';
import { Trouble } from './trouble';
import type { Type } from './types';
import type { Value } from './values';

const mostSuggestions = 25;
const mostCandidates = 1_000;

/** A line that was computed. */
export interface Computed {
	type: Type;
	value: Value;
}

/** All lines of a note in one name space: finds what each means, whether it stands, and its value. */
export class Note {
	readonly troubles = new Map<NoteLine, Trouble[]>();
	/** Faults that do not keep a line from being computed. */
	readonly remarks = new Map<NoteLine, Trouble>();
	readonly computed = new Map<NoteLine, Computed>();
	readonly #definitions = new Map<string, NoteLine>();
	readonly #meter = new Meter();
	readonly #names: Set<string>;
	/** For each waiting line the one whose error it waits for; never a circle, for a line on a circle does not wait. */
	readonly #awaited = new Map<NoteLine, NoteLine>();
	#suggestions = 0;

	constructor(
		readonly lines: readonly NoteLine[],
		private readonly watch: Watch,
	) {
		this.#names = new Set(lines.flatMap((line) => (line.defined ? [line.defined.name] : [])));
		this.#define();
		this.#checkDoubleReadings();
		const uses = new Map([...this.#definitions].map(([name, line]) => [name, this.#usedBy(line)]));
		const { sorted, circles } = order(this.#definitions.keys(), (name) => uses.get(name) ?? []);
		for (const [name, circle] of circles) this.#reportCircle(name, circle);
		for (const name of sorted) this.#evaluate(this.#definitions.get(name)!);
		for (const line of lines)
			if (this.#definitions.get(line.defined?.name ?? '') !== line) this.#evaluate(line);
	}

	/** The line that defines a name, the first where there are several. */
	definition(name: string): NoteLine | undefined {
		return this.#definitions.get(name);
	}

	#known(): string[] {
		const lines = [...this.#definitions.values()].slice(0, mostCandidates);
		return lines.map((line) => line.defined?.typed ?? '');
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

	#define(): void {
		for (const line of this.lines) {
			const { defined } = line;
			if (!defined || line.requirement) continue;
			const first = this.#definitions.get(defined.name);
			if (first) {
				const named =
					first.defined?.typed === defined.typed
						? `\`${defined.typed}\``
						: `\`${defined.typed}\`, the same name as \`${first.defined?.typed ?? ''}\`,`;
				this.fail(
					line,
					new Trouble(
						'duplicate',
						defined,
						`${named} is already defined in ${whereabouts(first)}.`,
						{
							mend: 'Give one of the two another name.',
						},
					),
				);
				continue;
			}
			this.#definitions.set(defined.name, line);
			const reserved = whyReserved(defined.typed, this.#names);
			if (reserved)
				this.fail(
					line,
					new Trouble('reserved', defined, reserved.message, {
						mend: `Call the quantity \`${reserved.suggestion}\`, say.`,
						replacement: reserved.suggestion,
					}),
				);
			for (const [i, parameter] of line.parameters.entries()) {
				const why = whyReserved(parameter.typed, this.#names);
				if (why)
					this.fail(
						line,
						new Trouble('reserved', parameter, why.message, {
							mend: `Call it \`${why.suggestion}\`, say.`,
						}),
					);
				if (line.parameters.findIndex((p) => p.name === parameter.name) !== i)
					this.fail(
						line,
						new Trouble(
							'duplicate',
							parameter,
							`\`${parameter.typed}\` is already a value of this function.`,
						),
					);
			}
		}
	}

	/** `C = 10 nF`, then `5 C`: the unit is meant, but a reader may take it for the quantity. */
	#checkDoubleReadings(): void {
		const seen = new Set<string>();
		for (const line of this.lines)
			for (const behind of line.unitsBehindNumbers) {
				const { typed } = behind;
				const definition = this.#definitions.get(typed);
				if (!definition?.defined || seen.has(typed)) continue;
				seen.add(typed);
				const text = line.text.slice(behind.from, behind.to);
				const readings = `${behind.number} ${spokenUnit(typed)}, and as ${behind.number} times the quantity \`${typed}\``;
				const suggestion = whyReserved(typed, this.#names)?.suggestion ?? `${typed}1`;
				this.remarks.set(
					line,
					new Trouble(
						'ambiguous',
						behind,
						`\`${text}\` can be read as ${readings} (${whereabouts(definition)}). It counts as the unit.`,
						{
							mend: `Call the quantity \`${suggestion}\`, say.`,
						},
					),
				);
			}
	}

	#usedBy(line: NoteLine): string[] {
		return line.references
			.map((reference) => reference.name)
			.filter((name) => this.#definitions.has(name));
	}

	#reportCircle(name: string, circle: string[]): void {
		const lines = circle
			.filter((member) => member !== leftOut)
			.map((member) => this.#definitions.get(member)!);
		// A function may use itself: whether it ends is seen when it is computed.
		if (lines.every((line) => line.kind === 'function')) return;
		const line = this.#definitions.get(name)!;
		const next = circle[1];
		const at = line.references.find((reference) => reference.name === next) ?? line.defined!;
		const shown = circle
			.map((member) => this.#definitions.get(member)?.defined?.typed ?? member)
			.join(' → ');
		const itself = circle.length === 2;
		this.fail(
			line,
			new Trouble(
				'circle',
				at,
				itself
					? `\`${line.defined?.typed ?? ''}\` is defined by itself: ${shown}.`
					: `The definitions go in a circle: ${shown}.`,
				{
					mend: 'Define one of them without the others.',
				},
			),
		);
	}

	/** The line at the bottom of a chain of waiting lines. */
	#root(line: NoteLine): NoteLine {
		let at = line;
		for (let next = this.#awaited.get(at); next; next = this.#awaited.get(at)) at = next;
		return at;
	}

	#broken(line: NoteLine): boolean {
		return this.troubles.has(line);
	}

	#evaluate(line: NoteLine): void {
		if (line.kind === 'blank' || line.kind === 'comment') return;
		if (line.trouble) {
			const unit = line.trouble.how.unitName;
			const meant = unit === undefined ? undefined : this.#definitions.get(unit);
			if (meant) this.#awaited.set(line, meant);
			this.fail(
				line,
				meant && unit !== undefined ? this.waiting(unit, meant, line.trouble.at) : line.trouble,
			);
		}
		if (!line.body || this.#broken(line)) return;
		this.watch.at?.(line.cell, line.line);
		this.#meter.startLine();
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
			if (!used) found.push(this.#unknown(reference, line));
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

	#unknown(
		{ typed, called, from, to }: { typed: string; called: boolean } & Place,
		line: NoteLine,
	): Trouble {
		const before = line.text.slice(0, from);
		const behindNumber = /\d\s*$/.test(before);
		const message = called ? `There is no function \`${typed}\`.` : `\`${typed}\` is not defined.`;
		const code = /^([kMGmRunp\u00b5])(\d+)$/.exec(typed);
		if (behindNumber && code) {
			const number = `${/\d+\s*$/.exec(before)?.[0].trim() ?? ''}.${code[2] ?? ''}`;
			const mend = `Write the decimal mark and the unit: \`${number} ${code[1] === 'R' ? '' : (code[1] ?? '')}ohm\`, say.`;
			return new Trouble('unknownName', { from, to }, message, { mend });
		}
		if (behindNumber && /^[kMGmunp\u00b5]$/.test(typed))
			return new Trouble('unknownName', { from, to }, message, {
				mend: `A prefix needs its unit: \`${typed}ohm\` or \`${typed}V\`, say.`,
			});
		const own = line.parameters.map((parameter) => parameter.typed);
		const near = this.suggest(typed, [
			...own,
			...builtInNames(),
			...(behindNumber ? unitNames() : []),
		]);
		return new Trouble(
			'unknownName',
			{ from, to },
			message,
			near === undefined ? {} : { mend: `Did you mean \`${near}\`?`, replacement: near },
		);
	}

	/** The name that a wrong one may have meant. Comparing takes time: only the first wrong ones of a note get one. */
	suggest(typed: string, others: Iterable<string>): string | undefined {
		if (this.#suggestions >= mostSuggestions || typed.length > 60) return undefined;
		this.#suggestions += 1;
		const names = [...others, ...this.#known()];
		return nearest(
			typed,
			names.filter((name) => name !== typed),
		);
	}

	readonly #types: Types = {
		of: (name) => this.computed.get(this.#definitions.get(name)!)?.type,
		function: (name) => this.#function(name),
		constant: (node) => this.#constant(node),
		calls: new Map(),
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

function spokenUnit(typed: string): string {
	const symbol = findSymbol(typed);
	return symbol ? spokenName(symbol) : typed;
}
