import { formulasOf } from '$lib/note/trial';
import type { Evaluation } from '$lib/calc/results';
import type { NoteCell } from '$lib/note/document';
import type { TrialRanges } from '$lib/schemas/trial';
import { rangeAround, rangeOf, type SliderRange } from './slider-range';
import { readStated, type StatedValue } from './stated-value';

/** A quantity that a trial can change: its line states a value and uses no other quantity. */
export interface TrialInput {
	name: string;
	cellId: string;
	formula: string;
	/** Its value in `unit`, as the readout's number is typed. */
	value: number;
	unit: string;
	/** How the formula states the value; undefined where it computes one. */
	stated: StatedValue | undefined;
	description: string | undefined;
	text: string;
}

/** The inputs of a note in the order of the sheet. */
export function inputsOf(cells: readonly NoteCell[], { quantities }: Evaluation): TrialInput[] {
	return [...formulasOf(cells)].flatMap(([name, { cellId, formula }]) => {
		const quantity = Object.hasOwn(quantities, name) ? quantities[name] : undefined;
		if (!quantity || quantity.dependsOn.length > 0 || quantity.value === null) return [];
		const stated = readStated(formula);
		const unit = quantity.unit === '1' ? '' : quantity.unit;
		// The number in the line is in the unit that is typed there.
		const own = stated && { value: stated.number, unit: stated.unit };
		return {
			name,
			cellId,
			formula,
			...(own ?? { value: quantity.value, unit }),
			stated,
			description: quantity.description,
			text: quantity.text,
		};
	});
}

/** The slider of an input: what its doubt leaves open, or as much again to either side. */
export function rangeOfInput(
	{ name, value }: TrialInput,
	ranges: TrialRanges,
	evaluation: Evaluation,
): SliderRange {
	const known = Object.hasOwn(ranges, name) ? ranges[name] : undefined;
	const present = evaluation.quantities[name]?.value;
	if (!known || present === null || present === undefined || !(known.upper > known.lower))
		return rangeAround(value);
	// Both are in the quantity's unit, which need not be the one that is typed.
	const times = present === 0 || value === 0 ? 1 : value / present;
	return rangeOf(value + (known.lower - present) * times, value + (known.upper - present) * times);
}
