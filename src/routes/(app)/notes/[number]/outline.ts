import type { Evaluation } from '$lib/calc/results';
import { figuresOf, shownIn } from '$lib/components/figures';
import { headingsOf, type Heading } from '$lib/components/markdown';
import type { NoteCell } from '$lib/note/document';

interface Entry {
	cellId: string;
	terminal: number;
	text: string;
	/** 2 to 4. */
	level: number;
}

/** Headings as they were read last: figures change with each key, and headings hardly ever. */
const known = new WeakMap<NoteCell, { source: string; shown: string; headings: Heading[] }>();

function headingsIn(cell: NoteCell, evaluation: Evaluation): Heading[] {
	const { source } = cell;
	const find = figuresOf(cell, evaluation);
	const shown = shownIn(source, find);
	const last = known.get(cell);
	if (last?.source === source && last.shown === shown) return last.headings;
	const headings = headingsOf(source, find);
	known.set(cell, { source, shown, headings });
	return headings;
}

/** Headings of a note's text cells with the terminals of their cells. */
export function outlineOf(cells: readonly NoteCell[], evaluation: Evaluation): Entry[] {
	return cells.flatMap((cell, index) => {
		if (cell.kind !== 'text' || !/#|^[=-]+\s*$/m.test(cell.source)) return [];
		return headingsIn(cell, evaluation).map((heading) => ({
			...heading,
			cellId: cell.id,
			terminal: index + 1,
		}));
	});
}
