import type { Correlations } from './doubt/correlations';
import type { Fitted } from './given-cells';
import type { Input } from './inputs';
import type { Node } from './language/nodes';
import type { Display, Quantity, Readout, Requirement, WorkedLine } from './results';
import type { Doubt } from './trace';
import type { Type } from './types';
import { isGrid, type Value } from './values';

/** A line that was computed. The same object as long as nothing of it changes. */
export interface Computed {
	readonly type: Type;
	readonly value: Value;
	/** How it depends on inputs; absent where it is exact. */
	readonly doubt?: Doubt;
	/** Inputs that the line states, and the number of the first. */
	readonly inputs: readonly Input[];
	readonly firstInput: number;
}

/** What a line was computed from, and what came of it. */
export interface Remembered {
	/** Results of the lines it uses, in order of its references. */
	readonly uses: readonly unknown[];
	readonly firstInput: number;
	/** Operations that computing took. */
	readonly spent: number;
	/** Second derivatives that belong to it, and whether the note had so many left. */
	readonly curvatures: number;
	readonly secondOrder: boolean;
	readonly computed: Computed;
	/** What was last shown of it, kept while that stays the same. */
	shown?: Shown;
}

export interface Shown {
	readonly correlations: Correlations;
	readonly readout: Readout;
	/** Of a number in doubt. */
	readonly fields: Partial<Quantity>;
	quantity?: Quantity;
	line?: WorkedLine;
	requirement?: Requirement;
	/** How its value was set. */
	choice?: Display | undefined;
}

/** A fitted curve whose deviations are inputs of the note, and the number of the first. */
export interface NumberedCurve {
	readonly fitted: Fitted;
	readonly firstInput: number;
}

/** What an evaluation leaves for the next one of the same note, so that an edit computes only what depends on it. */
export class Memory {
	#lines = new Map<Node, Remembered>();
	#names = new Map<string, Remembered>();
	#functions = new Map<Node, { uses: readonly unknown[]; token: object }>();
	#curves = new Map<string, NumberedCurve>();
	#correlations: { uses: readonly unknown[]; stated: Correlations } | undefined;
	#earlier = this.#now();

	/** Begins an evaluation: what it does not use again is forgotten. */
	begin(): void {
		this.#earlier = this.#now();
		this.#lines = new Map();
		this.#names = new Map();
		this.#functions = new Map();
		this.#curves = new Map();
	}

	#now() {
		return {
			lines: this.#lines,
			names: this.#names,
			functions: this.#functions,
			curves: this.#curves,
		};
	}

	/** A line's result, where it was computed from the same. */
	recall(body: Node, uses: readonly unknown[], firstInput: number): Remembered | undefined {
		const known = this.#earlier.lines.get(body);
		if (!known || !alike(known.uses, uses)) return undefined;
		if (known.firstInput !== firstInput && known.computed.inputs.length > 0) return undefined;
		return known;
	}

	keep(body: Node | undefined, name: string | undefined, remembered: Remembered): void {
		if (body) this.#lines.set(body, remembered);
		if (name !== undefined) this.#names.set(name, remembered);
	}

	/** With the earlier result of the name where the new one equals it: what uses it need not be computed again. */
	settled(name: string | undefined, remembered: Remembered): Remembered {
		const earlier = name === undefined ? undefined : this.#earlier.names.get(name);
		if (!earlier || earlier === remembered) return remembered;
		const [a, b] = [earlier.computed, remembered.computed];
		if (a === b || a.doubt || b.doubt || a.inputs.length + b.inputs.length > 0) return remembered;
		if (!sameValue(a.value, b.value) || !sameType(a.type, b.type)) return remembered;
		return { ...remembered, computed: a, ...(earlier.shown && { shown: earlier.shown }) };
	}

	/** What is stated of correlations, the same object as long as it is stated from the same. */
	correlations(uses: readonly unknown[], stated: Correlations): Correlations {
		if (!this.#correlations || !alike(this.#correlations.uses, uses))
			this.#correlations = { uses, stated };
		return this.#correlations.stated;
	}

	/** A curve as it was fitted, where it was fitted through the same readings. */
	curve(key: string, firstInput: number, make: () => NumberedCurve): NumberedCurve {
		const known = this.#earlier.curves.get(key);
		const curve = known?.firstInput === firstInput ? known : make();
		this.#curves.set(key, curve);
		return curve;
	}

	/** Stands for a function of the note as long as it and what it uses are the same. */
	functionToken(body: Node, uses: readonly unknown[]): object {
		const known = this.#earlier.functions.get(body);
		const token = known && alike(known.uses, uses) ? known.token : {};
		this.#functions.set(body, { uses, token });
		return token;
	}
}

/** Whether two results rest on the same. */
export function alike(a: readonly unknown[], b: readonly unknown[]): boolean {
	return a.length === b.length && a.every((use, i) => use !== undefined && use === b[i]);
}

function sameValue(a: Value, b: Value): boolean {
	if (!isGrid(a) || !isGrid(b)) return Object.is(a, b);
	return (
		a.shape.join() === b.shape.join() && a.data.every((x, i) => Object.is(x, b.data[i] ?? NaN))
	);
}

function sameType(a: Type, b: Type): boolean {
	return (
		a.kind === b.kind &&
		a.dimension?.key === b.dimension?.key &&
		a.point === b.point &&
		a.text === b.text &&
		a.fixed === b.fixed &&
		a.unit?.text === b.unit?.text &&
		a.unit?.factor === b.unit?.factor
	);
}
