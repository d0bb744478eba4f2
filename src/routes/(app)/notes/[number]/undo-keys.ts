import type { WorkingCopy } from '$lib/client/working-copy.svelte';

/** Undo and redo of the note from anywhere on the page; a field that is being filled in keeps its own. */
export function undoKeys(event: KeyboardEvent, copy: WorkingCopy): void {
	if (event.defaultPrevented || !(event.ctrlKey || event.metaKey) || event.altKey) return;
	const inField =
		event.target instanceof Element &&
		event.target.closest('input, textarea, select, [contenteditable=true], dialog');
	if (inField || event.key.toLowerCase() !== 'z') return;
	event.preventDefault();
	if (event.shiftKey) copy.redo();
	else copy.undo();
}
