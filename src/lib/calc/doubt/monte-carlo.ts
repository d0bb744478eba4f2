import { histogram, moments, shortestInterval, symmetricInterval, tolerance } from './intervals';
import type { Histogram, Interval } from './intervals';
import type { Model } from './model';
import { compile } from './program';
import { sorted } from './sort';
import { stretchLength, Trials } from './trials';

export interface TrialOptions {
	/** How many trials, 10⁶ by default; with `adaptive` how many at most. */
	trials?: number;
	/** Goes on until results are stable to two digits of the standard uncertainty (JCGM 101:2008, 7.9). */
	adaptive?: boolean;
	seed: number;
	/** Coverage probability of the intervals, 0.95 by default. */
	coverage?: number;
	bins?: number;
}

/** What trials say of one quantity, in its coherent unit. */
export interface TrialResult {
	/** Trials that gave a finite value; the others are `invalid` and in no other figure. */
	trials: number;
	invalid: number;
	mean: number;
	standardUncertainty: number;
	symmetric: Interval;
	shortest: Interval;
	histogram: Histogram;
	/** With `adaptive`: whether the results became stable before the trials ran out. */
	stable?: boolean;
}

const defaultTrials = 1_000_000;
/** Coverage below which a result with this few values says nothing. */
const fewest = 2;

/**
 * Trials of some lines of a model, drawn bit by bit: `advance` until `done`, then `results`. Whoever drives it may
 * report progress in between, or stop and take the results of the trials drawn so far.
 */
export class Simulation {
	readonly #trials: Trials;
	readonly #values: Float64Array[];
	readonly #stability: Stability | undefined;
	readonly #total: number;
	#drawn = 0;

	/** `outputs` are places of lines in the model. */
	constructor(
		model: Model,
		outputs: readonly number[],
		readonly options: TrialOptions,
	) {
		this.#total = Math.max(fewest, Math.floor(options.trials ?? defaultTrials));
		this.#trials = new Trials(model, compile(model, outputs), options.seed);
		this.#values = outputs.map(() => new Float64Array(this.#total));
		if (options.adaptive) this.#stability = new Stability(outputs.length, options.coverage ?? 0.95);
	}

	/** Trials drawn so far, and how many there will be at most. */
	get progress(): { drawn: number; total: number } {
		return { drawn: this.#drawn, total: this.#total };
	}

	get done(): boolean {
		return this.#drawn >= this.#total || this.#stability?.reached === true;
	}

	/** Draws some stretches of a thousand trials more; with `adaptive` at least a block of 7.9.4. */
	advance(stretches = 10): void {
		const block = this.#stability?.block ?? 0;
		const until = Math.min(this.#total, this.#drawn + Math.max(block, stretches * stretchLength));
		const from = this.#drawn;
		while (this.#drawn < until) {
			const count = Math.min(stretchLength, until - this.#drawn);
			this.#trials.draw(this.#drawn / stretchLength, count, this.#values, this.#drawn);
			this.#drawn += count;
		}
		if (this.#stability)
			for (let at = from; at + block <= this.#drawn; at += block) {
				if (!this.#stability.add(this.#values, at)) continue;
				// What was drawn beyond the block that settled it does not count, however large the steps were.
				this.#drawn = at + block;
			}
	}

	/** One result for each output, from the trials drawn so far. */
	results(): TrialResult[] {
		return this.#values.map((values) => ({
			...summarise(values.subarray(0, this.#drawn), this.options),
			...(this.#stability ? { stable: this.#stability.reached } : {}),
		}));
	}
}

/** Runs all trials in one go. `onProgress` is told how many are drawn and may stop them by answering false. */
export function simulate(
	model: Model,
	outputs: readonly number[],
	options: TrialOptions,
	onProgress?: (drawn: number, total: number) => boolean,
): TrialResult[] {
	const simulation = new Simulation(model, outputs, options);
	while (!simulation.done) {
		simulation.advance(20);
		const { drawn, total } = simulation.progress;
		if (onProgress && !onProgress(drawn, total)) break;
	}
	return simulation.results();
}

/** Mean, standard deviation, intervals and histogram of the values of trials. */
export function summarise(
	values: Float64Array,
	{ coverage = 0.95, bins }: Pick<TrialOptions, 'coverage' | 'bins'>,
): TrialResult {
	const finite = finiteOf(values);
	const order = sorted(finite);
	return {
		trials: finite.length,
		invalid: values.length - finite.length,
		...moments(finite),
		symmetric: symmetricInterval(order, coverage),
		shortest: shortestInterval(order, coverage),
		histogram: histogram(order, bins),
	};
}

/** The values that are numbers: all of them as they are, or what is left of them. */
function finiteOf(values: Float64Array): Float64Array {
	for (let i = 0; i < values.length; i++)
		if (!Number.isFinite(values[i]!)) return values.filter((value) => Number.isFinite(value));
	return values;
}

/** The adaptive procedure of JCGM 101:2008, 7.9.4: blocks of trials, until their results scatter little enough. */
class Stability {
	/** Trials in a block, a whole number of stretches. */
	readonly block: number;
	reached = false;
	/** Of each output, the estimates of all blocks: mean, standard uncertainty and both ends of the interval. */
	readonly #estimates: number[][][];

	constructor(
		outputs: number,
		readonly coverage: number,
	) {
		const fewest = Math.max(10_000, 100 / (1 - coverage));
		this.block = Math.ceil(fewest / stretchLength) * stretchLength;
		this.#estimates = Array.from({ length: outputs }, () => [[], [], [], []]);
	}

	/** Takes in the block that starts at trial `at`, and says whether all results are stable now. */
	add(values: readonly Float64Array[], at: number): boolean {
		this.reached = values
			.map((all, k) => this.#isStable(all, at, this.#estimates[k]!))
			.every(Boolean);
		return this.reached;
	}

	#isStable(all: Float64Array, at: number, estimates: number[][]): boolean {
		const values = finiteOf(all.subarray(at, at + this.block));
		const { mean, standardUncertainty } = moments(values);
		const [low, high] = symmetricInterval(sorted(values), this.coverage);
		[mean, standardUncertainty, low, high].forEach((estimate, i) => estimates[i]!.push(estimate));
		const blocks = estimates[0]!.length;
		if (blocks < 2) return false;
		const delta = tolerance(moments(all.subarray(0, at + this.block)).standardUncertainty);
		return estimates.every((figures) => {
			const scatter = moments(Float64Array.from(figures)).standardUncertainty / Math.sqrt(blocks);
			return 2 * scatter <= delta;
		});
	}
}
