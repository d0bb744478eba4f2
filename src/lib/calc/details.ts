import { budgetOf, type Doubts } from './doubt/budget';
import { simulate, summarise, type TrialOptions, type TrialResult } from './doubt/monte-carlo';
import { awaitOthers, sharedDraw, takePart, type SharedDraw } from './doubt/shared-trials';
import { validate } from './doubt/validation';
import { choiceOf, inChosenUnit } from './chosen-unit';
import type { Input } from './inputs';
import type { Computed } from './memory';
import type { Note } from './note';
import type { Watch } from './note-lines';
import type { BudgetRow, MonteCarlo, MonteCarloOptions, Options, WorstCase } from './results';
import { show, unitOf } from './show';
import { modelOf, type Bounds, type Step } from './steps';
import type { Type } from './types';
import { difference } from './functions/stated';
import { readout } from './units/display';
import { differenceFromSI, divided, fromSI } from './units/unit';
import { finiteUncertainty, stepOf } from './uncertainty';

/**
 * The uncertainty budget of a number: every input it depends on, the greatest contribution first. Numbers are in the units
 * of the types; texts of the number in that of `setType`, and of its inputs in those that `set` gives.
 */
export function budgetRows(
	step: Step,
	type: Type,
	inputs: readonly Input[],
	doubts: Doubts,
	set: (name: string, type: Type) => Type,
	setType: Type,
): BudgetRow[] {
	const unit = unitOf(type);
	const { support, gradient } = step.propagated;
	const budget = budgetOf(step.propagated, doubts);
	return budget.places.map((place, i) => {
		const sensitivity = gradient[place]!;
		const contribution = budget.contributions[i]!;
		const { label, value, type: inputType, distribution } = inputs[support[place]!]!;
		const inputUnit = unitOf(inputType);
		const setInput = set(label, inputType);
		const perUnit = differenceFromSI(1, inputUnit);
		const { uncertainty, dof, kind } = distribution;
		return {
			input: label,
			unit: inputUnit.text,
			value: fromSI(value, inputUnit),
			standardUncertainty: differenceFromSI(uncertainty, inputUnit),
			degreesOfFreedom: Number.isFinite(dof) ? dof : null,
			distribution: kind,
			sensitivity: differenceFromSI(sensitivity, unit) / perUnit,
			contribution: differenceFromSI(contribution, unit),
			share: budget.shares[i]!,
			texts: {
				value: show(value, setInput).text,
				standardUncertainty: short(uncertainty, setInput),
				contribution: short(contribution, setType),
				sensitivity: readout(
					sensitivity,
					divided(unitOf(setType), unitOf(setInput)),
					!setType.fixed,
					4,
				).text,
			},
		};
	});
}

/** An uncertainty as it is written, to two significant digits. */
export function short(si: number, type: Type): string {
	const plain = difference(type);
	return readout(si, unitOf(plain), !plain.fixed, 2).text;
}

/** Lowest and highest value, as numbers in the unit of a type and as text in that of another. */
export function worstCaseOf(step: Step, type: Type, bounds: Bounds, setType: Type): WorstCase {
	const { lower, upper, exact } = bounds.of(step);
	const unit = unitOf(type);
	const spoken = (si: number) => show(si, setType).text;
	return {
		lower: fromSI(lower, unit),
		upper: fromSI(upper, unit),
		exact,
		text: `${spoken(lower)} to ${spoken(upper)}`,
	};
}

/** Values that are kept at once; more quantities, or more trials, are taken in turns. */
const mostValues = 4_000_000;

/** The trials of all outputs, of a few at a time so that memory stays bounded. They are the same trials. */
function inGroups(
	wanted: readonly Wanted[],
	{ model, places }: ReturnType<typeof modelOf>,
	options: TrialOptions,
	{ trials: told, crew }: Watch,
): TrialResult[] {
	const count = options.trials ?? 1_000_000;
	const most = Math.max(1, Math.floor(mostValues / count));
	const groups = Math.ceil(wanted.length / most);
	const results: TrialResult[] = [];
	for (let i = 0; i < groups; i++) {
		const group = wanted.slice(i * most, (i + 1) * most);
		const outputs = group.map(({ step }) => places.get(step)!);
		const onProgress = (drawn: number, total: number) =>
			told?.(i * total + drawn, groups * total) ?? true;
		if (!crew || options.adaptive) {
			results.push(...simulate(model, outputs, options, onProgress));
			continue;
		}
		const draw = sharedDraw(outputs.length, count, options.seed);
		crew(
			group.map(({ name }) => name),
			draw,
		);
		takePart(model, outputs, draw, onProgress);
		awaitOthers(draw);
		results.push(...draw.values.map((values) => summarise(values, options)));
	}
	return results;
}

/** Draws trials of quantities beside another thread that computes the same note. */
export function helpWithTrials(note: Note, names: readonly string[], draw: SharedDraw): void {
	const steps = wantedOf(note, names).map(({ step }) => step);
	const { model, places } = modelOf(steps, note.inputs, note.correlations);
	takePart(
		model,
		steps.map((step) => places.get(step)!),
		draw,
	);
}

interface Wanted {
	name: string;
	computed: Computed;
	step: Step;
}

/** The quantities in doubt among some names. */
function wantedOf(note: Note, names: readonly string[]): Wanted[] {
	return names.flatMap((name) => {
		const computed = note.find(name);
		const step = computed && stepOf(computed);
		return step ? [{ name, computed, step }] : [];
	});
}

/** Trials of some quantities of a note by name; those that are exact or unknown are left out. */
export function trialsOf(
	note: Note,
	options: Options,
	{ quantities, trials, adaptive, seed }: MonteCarloOptions,
	watch: Watch = {},
): Map<Computed, MonteCarlo> {
	const wanted = wantedOf(note, quantities);
	const found = new Map<Computed, MonteCarlo>();
	if (wanted.length === 0) return found;
	const steps = wanted.map(({ step }) => step);
	const { coverage } = options;
	const drawing = {
		seed,
		coverage,
		...(trials !== undefined && { trials }),
		...(adaptive !== undefined && { adaptive }),
	};
	const model = modelOf(steps, note.inputs, note.correlations);
	const results = inGroups(wanted, model, drawing, watch);
	wanted.forEach(({ name, computed, step }, i) => {
		const result = results[i]!;
		const { type } = computed;
		const unit = unitOf(type);
		const setType = inChosenUnit(type, choiceOf(name, options));
		const spoken = (si: number) => show(si, setType).text;
		const between = ([low, high]: readonly [number, number]) => `${spoken(low)} to ${spoken(high)}`;
		const inUnit = ([low, high]: readonly [number, number]): [number, number] => [
			fromSI(low, unit),
			fromSI(high, unit),
		];
		const first = finiteUncertainty(step, note.doubts, coverage);
		const { histogram, mean, standardUncertainty, symmetric, shortest } = result;
		found.set(computed, {
			trials: result.trials,
			invalid: result.invalid,
			seed,
			mean: fromSI(mean, unit),
			standardUncertainty: differenceFromSI(standardUncertainty, unit),
			symmetric: inUnit(symmetric),
			shortest: inUnit(shortest),
			histogram: {
				from: fromSI(histogram.from, unit),
				to: fromSI(histogram.to, unit),
				counts: histogram.counts,
			},
			validated: first
				? validate(
						step.propagated.value,
						first.standardUncertainty,
						first.expandedUncertainty,
						symmetric,
					).holds
				: null,
			...(result.stable !== undefined && { stable: result.stable }),
			texts: {
				mean: spoken(mean),
				standardUncertainty: short(standardUncertainty, setType),
				symmetric: between(symmetric),
				shortest: between(shortest),
			},
		});
	});
	return found;
}
