import { tick } from 'svelte';
import type { Sheet } from '../sheet.svelte';
import { chordOf, type Action } from './action';
import { cellActions } from './cell-actions';
import { lineActions } from './line-actions';
import { noteActions } from './note-actions';

const ofNote = 'The note';

/** Everything that can be done on the sheet now, by what it is done with. */
export function actionsOf(sheet: Sheet): { of: string; actions: Action[] }[] {
	const at = sheet.at ?? sheet.copy.cells[0]?.id;
	return [
		{ of: 'At the cursor', actions: lineActions(sheet) },
		{ of: 'The cell', actions: at === undefined ? [] : cellActions(sheet, at) },
		{ of: ofNote, actions: noteActions(sheet) },
	].filter(({ actions }) => actions.length > 0);
}

/** Does an action and leaves the focus where it was, unless the action takes it elsewhere. */
export async function perform(sheet: Sheet, action: Action): Promise<void> {
	if (action.off) return;
	sheet.told = '';
	const held = document.activeElement;
	action.run();
	if (action.keepsFocus) return;
	await tick();
	// A cell that moves takes its editor along, which loses the focus then.
	if (held instanceof HTMLElement && held.isConnected && held !== document.body) held.focus();
	else sheet.refocus();
}

/** Keys of actions, from anywhere on the page but a dialog; in a field that is filled in only those of the note. */
export function actionKeys(event: KeyboardEvent, sheet: Sheet): void {
	if (event.defaultPrevented || !(event.target instanceof Element)) return;
	const fills = event.target.closest('input, textarea, select');
	const writes = fills ?? event.target.closest('[contenteditable=true]');
	const asks = event.key === '?' && !writes && !event.ctrlKey && !event.metaKey && !event.altKey;
	const keys = asks ? '?' : chordOf(event);
	if (keys === undefined || event.target.closest('dialog')) return;
	const action = actionsOf(sheet)
		.flatMap(({ of, actions }) => (fills && of !== ofNote ? [] : actions))
		.find((each) => each.keys === keys);
	if (!action) return;
	event.preventDefault();
	event.stopPropagation();
	void perform(sheet, action);
}
