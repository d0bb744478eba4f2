import { definitionOf, usesOf } from '$lib/editor/uses';
import type { Place } from '$lib/editor/note-context';
import { unitOf, vocabulary } from '$lib/editor/vocabulary';
import type { CellKind, NoteCell } from '$lib/note/document';

/** A line or piece of text that uses a quantity. */
export interface Use extends Place {
	/** 1-based number of the cell in the sheet. */
	terminal: number;
	/** 1-based. */
	line: number;
	kind: CellKind;
	/** The line as it is written. */
	text: string;
}

/** Where a quantity is used, once for each line, in the order of the sheet; not where it is defined. */
export async function whereUsed(cells: readonly NoteCell[], name: string): Promise<Use[]> {
	const words = await vocabulary();
	const defined = definitionOf(cells, name);
	const places = usesOf(cells, name, (typed) => unitOf(words, typed) !== undefined);
	const seen = new Set<string>();
	return places.flatMap((place) => {
		const index = cells.findIndex(({ id }) => id === place.cellId);
		const cell = cells[index];
		if (!cell) return [];
		if (defined?.cellId === place.cellId && defined.from === place.from) return [];
		const before = cell.source.slice(0, place.from).split('\n');
		const line = before.length;
		const key = `${place.cellId} ${line}`;
		if (seen.has(key)) return [];
		seen.add(key);
		const text = cell.source.split('\n')[line - 1]?.trim() ?? '';
		return { ...place, terminal: index + 1, line, kind: cell.kind, text };
	});
}
