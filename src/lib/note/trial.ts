import type { TrialChange } from '$lib/schemas/trial';
import type * as Y from 'yjs';
import { placedCells, type NoteCell } from './document';

/** The formula of a name's line: where it stands in its cell's source, and what it is. */
interface FormulaPlace {
	cellId: string;
	/** 1-based. */
	line: number;
	from: number;
	to: number;
	formula: string;
}

const head = /^(\s*)([\p{L}_][\p{L}\p{N}_]*)(\s*=(?!=)\s*)/u;

/** Where each name's formula stands; the first line that defines it counts. */
export function formulasOf(cells: readonly NoteCell[]): Map<string, FormulaPlace> {
	const found = new Map<string, FormulaPlace>();
	for (const { id, kind, source } of cells) {
		if (kind !== 'calculation') continue;
		let start = 0;
		for (const [row, text] of source.split('\n').entries()) {
			const match = head.exec(text);
			const name = match?.[2];
			if (match && name !== undefined && !found.has(name)) {
				const code = text.split('#', 1)[0] ?? '';
				const from = match[0].length;
				const to = Math.max(from, code.trimEnd().length);
				const place = { cellId: id, line: row + 1, from: start + from, to: start + to };
				found.set(name, { ...place, formula: text.slice(from, to) });
			}
			start += text.length + 1;
		}
	}
	return found;
}

/** Cells with the formulas that a trial changes, and the names that no line defines any more. */
export function withChanges<C extends NoteCell>(
	cells: readonly C[],
	changes: readonly TrialChange[],
): { cells: C[]; gone: string[] } {
	const places = formulasOf(cells);
	const gone: string[] = [];
	const writes = changes.flatMap(({ name, to }) => {
		const place = places.get(name);
		if (!place) gone.push(name);
		return place ? [{ ...place, text: to }] : [];
	});
	// From the last to the first, so that the places before stay where they are.
	writes.sort((a, b) => b.from - a.from);
	const changed = cells.map((cell) => {
		const source = writes
			.filter(({ cellId }) => cellId === cell.id)
			.reduce(
				(text, { from, to, text: next }) => text.slice(0, from) + next + text.slice(to),
				cell.source,
			);
		return source === cell.source ? cell : { ...cell, source };
	});
	return { cells: changed, gone };
}

/** A change that cannot be written, because its line says something else than when it was tried, or nothing. */
export interface Misfit {
	name: string;
	/** What its line says now; undefined where no line defines it. */
	now: string | undefined;
}

/** The changes whose lines are not as they were when the trial was begun. */
export function misfitsOf(cells: readonly NoteCell[], changes: readonly TrialChange[]): Misfit[] {
	const places = formulasOf(cells);
	return changes
		.map(({ name, from }) => ({ name, from, now: places.get(name)?.formula }))
		.filter(({ from, now }) => now !== from)
		.map(({ name, now }) => ({ name, now }));
}

/** Writes a trial's formulas into the note: all of them, or none where a line has changed since. Gives what hinders. */
export function writeChanges(doc: Y.Doc, changes: readonly TrialChange[]): Misfit[] {
	const cells = placedCells(doc);
	const misfits = misfitsOf(cells, changes);
	if (misfits.length > 0) return misfits;
	const texts = new Map(cells.map(({ id, text }) => [id, text]));
	const places = formulasOf(cells);
	const writes = changes.flatMap(({ name, to }) => {
		const place = places.get(name);
		return place ? [{ ...place, next: to }] : [];
	});
	for (const { cellId, from, to, next } of writes.sort((a, b) => b.from - a.from)) {
		const text = texts.get(cellId);
		text?.delete(from, to - from);
		text?.insert(from, next);
	}
	return [];
}
