import type { Evaluation, Quantity } from '$lib/calc/results';
import type { NoteCell } from '$lib/note/document';

/** A note's quantities by name, in the order in which the sheet defines them. */
export function registerOf(
	cells: readonly NoteCell[],
	{ quantities }: Evaluation,
): [string, Quantity][] {
	const places = new Map(cells.map((cell, index) => [cell.id, index]));
	const place = ({ cell }: Quantity) => places.get(cell) ?? cells.length;
	return Object.entries(quantities).sort(([, a], [, b]) => place(a) - place(b) || a.line - b.line);
}
