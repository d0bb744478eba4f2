import type * as Y from 'yjs';
import { addCell, cellsOf, placedCells, removeCell, type CellKind } from './document';

/**
 * Cuts a cell in two at an offset of its source and returns the id of the new second part; undefined where there would be
 * nothing in one of them. Formulas are cut between lines: the line at the offset goes to the second part.
 */
export function splitCell(doc: Y.Doc, id: string, at: number): string | undefined {
	const cell = placedCells(doc).find((each) => each.id === id);
	if (!cell) return undefined;
	const { source, kind, text } = cell;
	const from = kind === 'text' ? at : source.lastIndexOf('\n', at - 1) + 1;
	const before = source.slice(0, from).trimEnd();
	const behind = source.slice(from).replace(/^\s*\n/, '');
	if (before === '' || behind.trim() === '') return undefined;
	text.delete(before.length, source.length - before.length);
	return addCell(doc, kind, id, behind);
}

/** What joining a cell with the one below it needs. */
interface Joined {
	id: string;
	/** Where the second cell's source begins now. */
	at: number;
}

/** Puts the source of the cell below behind a cell's own; undefined where there is none of its kind. */
export function joinCells(doc: Y.Doc, id: string): Joined | undefined {
	const cells = placedCells(doc);
	const index = cells.findIndex((cell) => cell.id === id);
	const [cell, next] = [cells[index], cells[index + 1]];
	if (!cell || next?.kind !== cell.kind) return undefined;
	const between = cell.source === '' ? '' : cell.kind === 'text' ? '\n\n' : '\n';
	cell.text.insert(cell.source.length, between + next.source);
	removeCell(doc, next.id);
	return { id, at: cell.source.length + between.length };
}

/** Makes a cell one of another kind; what is written in it stays. */
export function changeKind(doc: Y.Doc, id: string, kind: CellKind): void {
	cellsOf(doc).get(id)?.set('kind', kind);
}
