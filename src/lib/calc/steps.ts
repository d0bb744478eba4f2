import { uncorrelated, type Correlations } from './doubt/correlations';
import { halfWidth } from './doubt/distributions/shapes';
import { enclose, type Enclosure } from './doubt/enclose';
import type { Model } from './doubt/model';
import { propagate, type Propagated } from './doubt/propagate';
import type { Node, Tape, TapeBuilder } from './doubt/tape';
import { worstCase, type WorstCase } from './doubt/worst-case';
import type { Inputs } from './inputs';

/** One number of a line in doubt: how it is computed from those of other lines and from inputs. */
export interface Step {
	readonly tape: Tape;
	readonly args: readonly Step[];
	/** Numbers in the note of the line's inputs. */
	readonly inputs: readonly number[];
	readonly propagated: Propagated;
}

/** Finishes a line's tape for each of its numbers and propagates them to first and second order. */
export function stepsOf(
	builder: TapeBuilder,
	nodes: readonly Node[],
	args: readonly Step[],
	firstInput: number,
	inputs: Inputs,
	count: number,
): Step[] {
	const numbers = Array.from({ length: count }, (_, i) => firstInput + i);
	const before = args.map((arg) => arg.propagated);
	return nodes.map((node) => {
		const tape = builder.finish(node);
		const propagated = propagate(tape, before, numbers, inputs.uncertainties);
		return { tape, args, inputs: numbers, propagated };
	});
}

/** The lines that some numbers need, as trials and bounds compute them. `places` has that of each number asked for. */
export function modelOf(
	wanted: readonly Step[],
	inputs: Inputs,
	correlations: Correlations = uncorrelated,
): { model: Model; places: number[]; steps: Step[] } {
	const place = new Map<Step, number>();
	const steps: Step[] = [];
	for (const root of wanted) {
		const open: { step: Step; next: number }[] = [{ step: root, next: 0 }];
		for (let at = open.at(-1); at; at = open.at(-1)) {
			const arg = at.step.args[at.next++];
			if (arg) {
				if (!place.has(arg)) open.push({ step: arg, next: 0 });
				continue;
			}
			open.pop();
			if (place.has(at.step)) continue;
			place.set(at.step, steps.length);
			steps.push(at.step);
		}
	}
	const model: Model = {
		steps: steps.map(({ tape, args, inputs: own }) => ({
			tape,
			args: args.map((arg) => place.get(arg)!),
			inputs: own,
		})),
		inputs: inputs.all.map((input) => input.distribution),
		correlations,
		streams: streams(inputs.all.map((input) => input.label)),
	};
	return { model, places: wanted.map((step) => place.get(step)!), steps };
}

/** Numbers of random streams made from the inputs' labels, no two alike. */
function streams(labels: readonly string[]): number[] {
	const taken = new Set<number>();
	return labels.map((label) => {
		// FNV-1a over UTF-16 units.
		let hash = 0x811c9dc5;
		for (let i = 0; i < label.length; i++)
			hash = Math.imul(hash ^ label.charCodeAt(i), 0x01000193) >>> 0;
		while (taken.has(hash)) hash = (hash + 1) >>> 0;
		taken.add(hash);
		return hash;
	});
}

/** Finds worst cases; what is known of a line serves those that use it. */
export class Bounds {
	readonly #enclosures = new WeakMap<Step, Enclosure>();
	#halfWidths: number[] = [];

	constructor(
		private readonly inputs: Inputs,
		private readonly sigmas?: number,
	) {}

	of(step: Step): WorstCase {
		for (let i = this.#halfWidths.length; i < this.inputs.all.length; i++)
			this.#halfWidths.push(halfWidth(this.inputs.all[i]!.distribution, this.sigmas));
		const { model, places, steps } = modelOf([step], this.inputs);
		for (const each of steps) this.#enclose(each);
		return worstCase(model, places[0]!, this.#enclosures.get(step)!, this.#halfWidths);
	}

	#enclose(step: Step): void {
		if (this.#enclosures.has(step)) return;
		const args = step.args.map((arg) => this.#enclosures.get(arg)!);
		this.#enclosures.set(step, enclose(step.tape, args, step.inputs, this.#halfWidths));
	}
}
