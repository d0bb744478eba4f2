import type * as Y from 'yjs';

/** Writes a new text over an old one, changing only what lies between the first and the last difference. */
export function replaceText(text: Y.Text, next: string): void {
	const before = text.toJSON();
	let start = 0;
	while (start < before.length && before[start] === next[start]) start += 1;
	let end = 0;
	const most = Math.min(before.length, next.length) - start;
	while (end < most && before.at(-1 - end) === next.at(-1 - end)) end += 1;
	text.delete(start, before.length - start - end);
	text.insert(start, next.slice(start, next.length - end));
}
