import { inputsOf } from '$lib/client/trial-inputs';
import { formulasOf, writeChanges, type Misfit } from '$lib/note/trial';
import type { TrialChange } from '$lib/schemas/trial';
import type { Sheet } from '../sheet.svelte';

/** Opens the trial panel, with one input chosen where a quantity that is one is named. */
export function beginTrial(sheet: Sheet, name?: string): void {
	const { copy, trial } = sheet;
	const input = inputsOf(copy.cells, copy.evaluation).find((each) => each.name === name);
	const change = input && { name: input.name, from: input.formula, to: input.formula };
	if (!trial.isOpen) trial.begin(change ? [change] : []);
	else if (change && !trial.changeOf(change.name)) trial.set(change);
	if (name !== undefined && !input) {
		sheet.told = `${name} follows from others. Choose an input.`;
	}
}

/** Opens changes that were kept or attached as this person's trial of the present note. */
export function openTrial(sheet: Sheet, changes: readonly TrialChange[], title?: string): void {
	const places = formulasOf(sheet.copy.cells);
	const gone = changes.filter(({ name }) => !places.has(name)).map(({ name }) => name);
	const rest = changes.flatMap((change) => {
		const from = places.get(change.name)?.formula;
		return from === undefined ? [] : [{ ...change, from }];
	});
	const other = rest.filter(({ name, from }) =>
		changes.some((c) => c.name === name && c.from !== from),
	);
	sheet.trial.begin(rest, title);
	const sentences = [
		...(gone.length > 0 ? [`The note has no ${list(gone)} any more.`] : []),
		...(other.length > 0
			? [`Changed in the note since: ${list(other.map(({ name }) => name))}.`]
			: []),
	];
	if (sentences.length > 0) sheet.told = sentences.join(' ');
}

/** Writes a trial into the note as one step to undo; gives whether that was done. Nothing is written where a line changed. */
export function applyTrial(sheet: Sheet, changes: readonly TrialChange[]): boolean {
	const misfits = sheet.copy.change((doc) => writeChanges(doc, changes));
	if (!misfits) return false;
	if (misfits.length > 0) {
		sheet.told = `Nothing was written. ${misfits.map(sentenceOf).join(' ')}`;
		return false;
	}
	const count = changes.length;
	sheet.told = `The trial is in the note: ${count} ${count === 1 ? 'line' : 'lines'} changed.`;
	return true;
}

function sentenceOf({ name, now }: Misfit): string {
	return now === undefined
		? `The note has no ${name} any more.`
		: `${name} was changed meanwhile, to ${now}.`;
}

/** Opens a comment on the cell of the first changed input, with the trial attached. */
export function attachTrial(sheet: Sheet): void {
	const { trial, copy } = sheet;
	const places = formulasOf(copy.cells);
	const first = trial.changes.flatMap(({ name }) => places.get(name)?.cellId ?? [])[0];
	const cell = first ?? sheet.at ?? copy.cells[0]?.id;
	if (cell !== undefined) sheet.composing = cell;
}

function list(names: readonly string[]): string {
	return names.join(', ');
}
