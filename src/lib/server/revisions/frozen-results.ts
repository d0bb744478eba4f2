import type { Evaluation, Options } from '$lib/calc/results';
import type { NoteContent } from '$lib/note/document';
import { optionsOf } from '../evaluation/note-options';
import { evaluateInChild } from '../evaluation/pool';
import { seedOf } from '../evaluation/seed';

/** Quantities whose trials are drawn at most; those of the first requirements come first. */
const most = 20;

/**
 * Results as a candidate keeps them, with the options that give them again: beside those of the sheet, budgets, bounds
 * and trials (JCGM 101:2008) of the quantities in doubt that requirements speak of.
 */
export async function frozenResults(
	noteId: string,
	content: NoteContent,
	results: Evaluation,
	signal?: AbortSignal,
): Promise<{ results: Evaluation; options: Options }> {
	const named = results.requirements.flatMap(({ dependsOn }) => dependsOn);
	const judged = [...new Set(named)].filter(
		(name) => results.quantities[name]?.standardUncertainty !== undefined,
	);
	if (judged.length === 0) return { results, options: optionsOf(content) };
	const monteCarlo = { quantities: judged.slice(0, most), seed: seedOf(noteId) };
	const options = { ...optionsOf(content), detail: judged, monteCarlo };
	return { results: await evaluateInChild(content.cells, options, { signal }), options };
}
