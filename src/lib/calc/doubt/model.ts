import type { Correlations } from './correlations';
import type { Distribution } from './distributions/distribution';
import type { Tape } from './tape';
import { evaluateTape, nodesFor } from './values';

/** One line in a model: its tape, the lines its arguments are, and the numbers its own inputs have in the note. */
export interface Step {
	tape: Tape;
	/** Place in `steps` of the line that each argument is. */
	args: ArrayLike<number>;
	inputs: ArrayLike<number>;
}

/** A note as it is computed: lines in an order in which each comes after its arguments. */
export interface Model {
	steps: readonly Step[];
	/** Distribution of each input, by its number. */
	inputs: ArrayLike<Distribution>;
	correlations?: Correlations;
	/**
	 * Number of each input's random stream, its own number by default. Taken from the input's name, it keeps the trials of
	 * a quantity the same when other lines come and go.
	 */
	streams?: ArrayLike<number>;
}

export function streamOf(model: Model, input: number): number {
	return model.streams?.[input] ?? input;
}

/** Places of the lines that `outputs` need, in their order. */
export function neededSteps(model: Model, outputs: readonly number[]): number[] {
	const needed = new Uint8Array(model.steps.length);
	for (const output of outputs) needed[output] = 1;
	for (let i = model.steps.length - 1; i >= 0; i--)
		if (needed[i]) for (const arg of Array.from(model.steps[i]!.args)) needed[arg] = 1;
	return Array.from(needed.keys()).filter((i) => needed[i]);
}

/** A line as a function of the deviations of all inputs of the note, by their numbers. */
export function lineFunction(model: Model, output: number): (deviations: Float64Array) => number {
	const values = new Float64Array(output + 1);
	const steps = neededSteps(model, [output]).map((place) => {
		const { tape, args, inputs } = model.steps[place]!;
		const given = new Float64Array(args.length);
		return { place, tape, args, inputs, given, own: new Float64Array(inputs.length) };
	});
	return (deviations) => {
		for (const { place, tape, args, inputs, given, own } of steps) {
			for (let k = 0; k < given.length; k++) given[k] = values[args[k]!]!;
			for (let k = 0; k < own.length; k++) own[k] = deviations[inputs[k]!] ?? 0;
			values[place] = evaluateTape(tape, given, nodesFor(tape), own);
		}
		return values[output]!;
	};
}
