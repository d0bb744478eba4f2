import { engineVersion } from '$lib/calc/engine';
import { sourceOf } from '$lib/calc/cells';
import type { SkippedLine } from '$lib/calc/note-lines';
import type { Cell, Evaluation, Fault } from '$lib/calc/results';

/** What is answered for a note that no try could finish: its lines without results, a fault on those to blame. */
export function withoutResults(cells: readonly Cell[], blamed: readonly SkippedLine[]): Evaluation {
	const errors = blamed.map(({ cell, line, code }): Fault => {
		const blamedCell = cells.find(({ id }) => id === cell);
		const text = blamedCell ? (sourceOf(blamedCell).split('\n')[line - 1] ?? '') : '';
		return {
			cell,
			line,
			from: 0,
			to: text.length,
			code,
			message:
				code === 'tooLong'
					? 'This line took too long to compute, so that nothing of the note was computed.'
					: 'This line took too much memory, so that nothing of the note was computed.',
			mend: 'Work on fewer values, or split the note.',
		};
	});
	return {
		engine: engineVersion,
		quantities: {},
		lines: [],
		requirements: [],
		figures: [],
		errors,
	};
}
