import { tick } from 'svelte';
import { cellKinds, type CellKind } from '$lib/note/document';
import { changeKind, joinCells, splitCell } from '$lib/note/reshape';
import type { Sheet } from '../sheet.svelte';
import type { Action } from './action';

/** What can be done with one cell. */
export function cellActions(sheet: Sheet, cellId: string): Action[] {
	const { copy } = sheet;
	const index = copy.cells.findIndex((cell) => cell.id === cellId);
	const cell = copy.cells[index];
	if (!cell) return [];
	const folded = sheet.folded.has(cellId);
	const comment: Action = {
		name: 'Comment',
		keys: 'Alt+Shift+C',
		run: () => (sheet.composing = cellId),
		keepsFocus: true,
	};
	const fold: Action = {
		name: folded ? 'Unfold' : 'Fold',
		keys: 'Alt+Shift+F',
		run: () => (folded ? sheet.folded.delete(cellId) : sheet.folded.add(cellId)),
	};
	if (!copy.editable) return [comment, fold];
	const { kind } = cell;
	const others = cellKinds.filter((each) => each !== kind);
	const next = cellKinds[(cellKinds.indexOf(kind) + 1) % cellKinds.length];
	return [
		comment,
		...(kind === 'text'
			? [{ name: 'Edit text', run: () => sheet.enter(cellId), keepsFocus: true }]
			: []),
		{
			name: 'Move up',
			keys: 'Alt+Shift+PageUp',
			run: () => sheet.shift(cellId, -1),
			off: index === 0,
		},
		{
			name: 'Move down',
			keys: 'Alt+Shift+PageDown',
			run: () => sheet.shift(cellId, 1),
			off: index === copy.cells.length - 1,
		},
		{ name: 'Duplicate', keys: 'Alt+Shift+D', run: () => void copy.duplicateCell(cellId) },
		{
			name: 'Add a cell below',
			keys: 'Alt+Shift+Enter',
			run: () => void sheet.add(kind, cellId),
			keepsFocus: true,
		},
		{
			name: 'Add a cell above',
			keys: 'Alt+Shift+H',
			run: () => void sheet.add(kind, copy.cells[index - 1]?.id ?? null),
			keepsFocus: true,
		},
		...cellKinds.map((each) => ({
			name: `Add ${each} below`,
			run: () => void sheet.add(each, cellId),
			keepsFocus: true,
		})),
		...others.map((each) => ({
			name: `Make it ${each}`,
			...(each === next && { keys: 'Alt+Shift+K' }),
			run: () => void makeKind(sheet, cellId, each),
			keepsFocus: true,
		})),
		{
			name: 'Split at the cursor',
			keys: 'Alt+Shift+S',
			run: () => void split(sheet, cellId),
			off: sheet.active?.cellId !== cellId,
			keepsFocus: true,
		},
		{
			name: 'Join with the cell below',
			keys: 'Alt+Shift+J',
			run: () => void join(sheet, cellId),
			off: copy.cells[index + 1]?.kind !== kind,
			keepsFocus: true,
		},
		fold,
		{
			name: 'Find a divider',
			run: () => (sheet.finding = cellId),
			keepsFocus: true,
		},
		{
			name: 'Delete',
			keys: 'Alt+Shift+Delete',
			run: () => void remove(sheet, cellId),
			keepsFocus: true,
		},
	];
}

async function makeKind(sheet: Sheet, cellId: string, kind: CellKind): Promise<void> {
	sheet.copy.change((doc) => changeKind(doc, cellId, kind));
	await tick();
	sheet.enter(cellId);
}

async function split(sheet: Sheet, cellId: string): Promise<void> {
	const at = sheet.active?.view.state.selection.main.head ?? 0;
	const id = sheet.copy.change((doc) => splitCell(doc, cellId, at));
	await tick();
	if (id === undefined) sheet.told = 'There is nothing to split off at the cursor.';
	sheet.enter(id ?? cellId, id === undefined ? { from: at, to: at, focus: true } : 'start');
}

async function join(sheet: Sheet, cellId: string): Promise<void> {
	const joined = sheet.copy.change((doc) => joinCells(doc, cellId));
	await tick();
	if (joined) sheet.enter(cellId, { from: joined.at, to: joined.at, focus: true });
}

async function remove(sheet: Sheet, cellId: string): Promise<void> {
	const { cells } = sheet.copy;
	const index = cells.findIndex((cell) => cell.id === cellId);
	const neighbour = cells[index + 1] ?? cells[index - 1];
	sheet.copy.removeCell(cellId);
	await tick();
	if (neighbour) sheet.focusTerminal(neighbour.id);
}
