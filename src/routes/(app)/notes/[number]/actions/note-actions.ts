import type { Sheet } from '../sheet.svelte';
import { beginTrial } from '../trial/trial-deeds';
import type { Action } from './action';

/** What can be done with the note as a whole, and ways through it. */
export function noteActions(sheet: Sheet): Action[] {
	const { copy } = sheet;
	const faults = copy.evaluation.errors.filter(({ code }) => code !== 'waits');
	return [
		{
			name: 'List all actions',
			keys: 'Alt+Shift+X',
			run: () => (sheet.tool = { kind: 'actions' }),
			keepsFocus: true,
		},
		{
			name: 'List all keys',
			keys: '?',
			run: () => (sheet.tool = { kind: 'keys' }),
			keepsFocus: true,
		},
		{
			name: 'Find and replace',
			keys: 'Alt+Shift+L',
			run: () => sheet.finder.open(),
			keepsFocus: true,
		},
		{
			name: 'Look through the register',
			keys: 'Alt+Shift+R',
			run: () => showRegister(),
			keepsFocus: true,
		},
		sheet.trial.isOpen
			? { name: 'End the trial', run: () => sheet.trial.close() }
			: {
					name: 'Open a trial: change inputs privately',
					keys: 'Alt+Shift+T',
					run: () => beginTrial(sheet),
					keepsFocus: true,
				},
		{
			name: 'Go to the next cell',
			keys: 'Alt+PageDown',
			run: () => step(sheet, 1),
			keepsFocus: true,
		},
		{
			name: 'Go to the cell before',
			keys: 'Alt+PageUp',
			run: () => step(sheet, -1),
			keepsFocus: true,
		},
		{
			name: 'Go to the next line with an error',
			keys: 'Alt+Shift+E',
			run: () => nextFault(sheet),
			off: faults.length === 0,
			keepsFocus: true,
		},
		{
			name: 'Compare with a revision or candidate',
			run: () => location.assign(`/notes/${sheet.number}/compare`),
			keepsFocus: true,
		},
		{
			name: 'Unfold all cells',
			run: () => sheet.folded.clear(),
			off: sheet.folded.size === 0,
		},
		...(copy.editable
			? [
					{ name: 'Undo', keys: 'Mod+Z', run: () => copy.undo(), off: !copy.canUndo },
					{ name: 'Redo', keys: 'Mod+Shift+Z', run: () => copy.redo(), off: !copy.canRedo },
				]
			: []),
	];
}

/** Comes to the register's filter, in its drawer where the window is narrow. */
function showRegister(): void {
	const rail = document.getElementById('rail');
	if (rail && getComputedStyle(rail).display === 'none') rail.showPopover();
	document.getElementById('register-filter')?.focus();
}

function step(sheet: Sheet, direction: -1 | 1): void {
	const { cells } = sheet.copy;
	const index = cells.findIndex(({ id }) => id === sheet.at);
	const next = index < 0 ? cells[0] : cells[index + direction];
	if (next) sheet.arrive(next.id);
}

/** The error behind the cursor, the first one after the last. */
function nextFault(sheet: Sheet): void {
	const { cells, evaluation } = sheet.copy;
	const placed = evaluation.errors
		.filter(({ code }) => code !== 'waits')
		.flatMap((fault) => {
			const index = cells.findIndex(({ id }) => id === fault.cell);
			const rows = cells[index]?.source.split('\n').slice(0, fault.line - 1) ?? [];
			const from = rows.reduce((length, row) => length + row.length + 1, 0) + fault.from;
			return index < 0
				? []
				: [{ index, cellId: fault.cell, from, to: from + fault.to - fault.from }];
		});
	const { cellId, view } = sheet.active ?? {};
	const here = cells.findIndex(({ id }) => id === (sheet.at ?? cellId));
	const head = cellId === sheet.at ? (view?.state.selection.main.head ?? -1) : -1;
	const behind = placed.find(
		({ index, from, to }) => index > here || (index === here && Math.max(from, to) > head),
	);
	const next = behind ?? placed[0];
	if (next) sheet.go(next);
}
