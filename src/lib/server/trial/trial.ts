import { movedBetween } from '$lib/calc/moved';
import type { Requirement } from '$lib/calc/results';
import { withChanges } from '$lib/note/trial';
import type { AttachedTrial, TrialAnswer, TrialChange, TrialRanges } from '$lib/schemas/trial';
import { demand, type Actor } from '../auth/access';
import { optionsOf } from '../evaluation/note-options';
import { evaluateInChild } from '../evaluation/pool';
import * as store from '../evaluation/store';
import * as notes from '../notes/notes';

/** What changed inputs do to the working copy, which itself does not change. */
export async function evaluate(
	actor: Actor,
	number: string,
	changes: readonly TrialChange[],
): Promise<TrialAnswer> {
	demand(actor, 'readWorkingCopy');
	const { id } = await notes.get(actor, number);
	const present = await store.current(id);
	return await answer(actor, id, present, changes);
}

/** The same as a comment keeps it. */
export async function attach(
	actor: Actor,
	number: string,
	changes: readonly TrialChange[],
): Promise<AttachedTrial> {
	demand(actor, 'readWorkingCopy');
	const { id } = await notes.get(actor, number);
	const present = await store.current(id);
	const { quantities, requirements } = await answer(actor, id, present, changes);
	const sources = new Map(present.content.cells.map((cell) => [cell.id, cell.source]));
	const row = (cell: string, line: number) => sources.get(cell)?.split('\n')[line - 1] ?? '';
	return {
		changes: changes.map(({ name, from, to }) => ({ name, from, to })),
		figures: quantities.map(({ name, before, after, difference, share }) => ({
			name,
			before: before?.text ?? null,
			after: after?.text ?? null,
			difference,
			share,
		})),
		verdicts: requirements.map(({ cell, line, before, after }) => ({
			cell,
			line,
			requirement: (row(cell, line).split('#', 1)[0] ?? '').trim(),
			before: before && judged(before),
			after: after && judged(after),
		})),
	};
}

/** Between which values the inputs in doubt lie: those that state their doubt themselves and use no other quantity. */
export async function ranges(actor: Actor, number: string): Promise<TrialRanges> {
	demand(actor, 'readWorkingCopy');
	const { id } = await notes.get(actor, number);
	const { content, results } = await store.current(id);
	const detail = Object.entries(results.quantities)
		.filter(
			([, { dependsOn, expandedUncertainty }]) => dependsOn.length === 0 && expandedUncertainty,
		)
		.map(([name]) => name);
	if (detail.length === 0) return {};
	const { quantities } = await evaluateInChild(
		content.cells,
		{ ...optionsOf(content), detail },
		{ note: id },
	);
	return Object.fromEntries(
		detail.flatMap((name) => {
			const { worstCase } = quantities[name] ?? {};
			return worstCase ? [[name, { lower: worstCase.lower, upper: worstCase.upper }]] : [];
		}),
	);
}

async function answer(
	{ personId }: Actor,
	noteId: string,
	{ content, results }: store.Stored,
	changes: readonly TrialChange[],
): Promise<TrialAnswer> {
	const { cells, gone } = withChanges(content.cells, changes);
	// A person's trials of a note follow each other closely, and each computes only what the last did not.
	const note = `${noteId} ${personId}`;
	const tried = await evaluateInChild(cells, optionsOf(content), { note });
	return { ...movedBetween(results, tried), gone };
}

function judged({ verdict, text }: Requirement) {
	return { verdict, text };
}
