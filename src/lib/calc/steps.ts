import { uncorrelated, type Correlations } from './doubt/correlations';
import { halfWidth } from './doubt/distributions/shapes';
import { enclose, type Enclosure } from './doubt/enclose';
import type { Model } from './doubt/model';
import { propagate, type Propagated } from './doubt/propagate';
import { TapeBuilder, type Node, type Tape } from './doubt/tape';
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
	secondOrder = true,
): Step[] {
	const numbers = Array.from({ length: count }, (_, i) => firstInput + i);
	const before = args.map((arg) => arg.propagated);
	return nodes.map((node) => {
		const tape = builder.finish(node);
		const propagated = propagate(tape, before, numbers, inputs.uncertainties, secondOrder);
		return { tape, args, inputs: numbers, propagated };
	});
}

/** The deviation of an input as a number of its own. */
export function inputStep(number: number, inputs: Inputs): Step {
	const builder = new TapeBuilder();
	const step = stepsOf(builder, [builder.input(0)], [], number, inputs, 1);
	return step[0]!;
}

/** The lines that some numbers need, each behind those it uses. */
export function neededBy(wanted: readonly Step[]): Map<Step, number> {
	const place = new Map<Step, number>();
	for (const root of wanted) {
		const open: { step: Step; next: number }[] = [{ step: root, next: 0 }];
		for (let at = open.at(-1); at; at = open.at(-1)) {
			const arg = at.step.args[at.next++];
			if (arg) {
				if (!place.has(arg)) open.push({ step: arg, next: 0 });
				continue;
			}
			open.pop();
			if (!place.has(at.step)) place.set(at.step, place.size);
		}
	}
	return place;
}

/** A note as trials and bounds compute it. `places` has that of each number asked for. */
export function modelOf(
	wanted: readonly Step[],
	inputs: Inputs,
	correlations: Correlations = uncorrelated,
): { model: Model; places: Map<Step, number> } {
	const places = neededBy(wanted);
	const model: Model = {
		steps: [...places.keys()].map(({ tape, args, inputs: own }) => ({
			tape,
			args: args.map((arg) => places.get(arg)!),
			inputs: own,
		})),
		inputs: inputs.all.map((input) => input.distribution),
		correlations,
		streams: streams(inputs.all.map((input) => input.label)),
	};
	return { model, places };
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

/** Worst cases of some numbers. */
export class Bounds {
	readonly #enclosures = new Map<Step, Enclosure>();
	readonly #halfWidths: number[];
	readonly #model: Model;
	readonly #places: ReadonlyMap<Step, number>;

	constructor(wanted: readonly Step[], inputs: Inputs, sigmas?: number) {
		this.#halfWidths = inputs.all.map(({ distribution }) => halfWidth(distribution, sigmas));
		({ model: this.#model, places: this.#places } = modelOf(wanted, inputs));
		for (const step of this.#places.keys()) {
			const args = step.args.map((arg) => this.#enclosures.get(arg)!);
			this.#enclosures.set(step, enclose(step.tape, args, step.inputs, this.#halfWidths));
		}
	}

	of(step: Step): WorstCase {
		const enclosure = this.#enclosures.get(step)!;
		return worstCase(this.#model, this.#places.get(step)!, enclosure, this.#halfWidths);
	}
}
