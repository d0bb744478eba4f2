import { anchorOf } from '$lib/note/anchor';
import type { Sheet } from './sheet.svelte';

/** Opens a comment on what is selected in the editor at hand, or on its line where nothing is. */
export function commentHere(sheet: Sheet): void {
	const { active, copy } = sheet;
	const text = active && copy.textOf(active.cellId);
	if (!active || !text) return;
	const { selection, doc } = active.view.state;
	const { main } = selection;
	const line = doc.lineAt(main.head);
	const stretch = main.empty ? { from: line.from, to: line.to } : { from: main.from, to: main.to };
	const words = doc.sliceString(stretch.from, stretch.to);
	if (words.trim() === '') {
		sheet.told = 'There are no words here to comment on.';
		return;
	}
	const anchor = anchorOf(text, stretch, main.empty ? 'line' : 'words');
	sheet.about = { cellId: active.cellId, anchor };
	sheet.composing = active.cellId;
}
