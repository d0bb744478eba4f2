import type { Evaluation } from '$lib/calc/results';
import { figuresOf } from '$lib/components/figures';
import { headingsOf } from '$lib/components/markdown';
import type { NoteCell } from '$lib/note/document';

interface Entry {
	cellId: string;
	terminal: number;
	text: string;
	/** 2 to 4. */
	level: number;
}

/** Headings of a note's text cells with the terminals of their cells. */
export function outlineOf(cells: readonly NoteCell[], evaluation: Evaluation): Entry[] {
	return cells.flatMap((cell, index) => {
		if (cell.kind !== 'text' || !/#|^[=-]+\s*$/m.test(cell.source)) return [];
		return headingsOf(cell.source, figuresOf(cell, evaluation)).map((heading) => ({
			...heading,
			cellId: cell.id,
			terminal: index + 1,
		}));
	});
}
