import { defaultOptions, evaluate } from '$lib/calc/evaluate';
import type { Evaluation } from '$lib/calc/results';
import type { NoteContent } from '$lib/note/document';
import type { Figures } from './judge';

/** What an evaluation shows, in an order of its own. */
export function figuresOf({ quantities, errors }: Evaluation): Figures {
	const shown = Object.entries(quantities).map(
		([name, { value, unit }]) => [name, `${String(value)} ${unit}`] as const,
	);
	return {
		quantities: Object.fromEntries(shown.sort(([a], [b]) => (a < b ? -1 : 1))),
		errors: errors.map(({ cell, line, code }) => `${cell}:${line} ${code}`).sort(),
	};
}

/** What the engine makes of a note when it is asked directly. */
export function compute({ cells }: NoteContent): Figures {
	return figuresOf(evaluate(cells, defaultOptions));
}
