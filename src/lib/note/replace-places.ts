import type * as Y from 'yjs';
import { placedCells } from './document';

interface Place {
	cellId: string;
	from: number;
	to: number;
}

/**
 * Writes a text at places of a note's cells, touching nothing else, so that what others type beside them stays. A place
 * that no longer holds `expected` is left alone. Gives how many were replaced.
 */
export function replacePlaces(
	doc: Y.Doc,
	places: readonly Place[],
	text: string,
	expected: (found: string) => boolean,
): number {
	const texts = new Map(placedCells(doc).map((cell) => [cell.id, cell.text]));
	let count = 0;
	// From the last to the first, so that the places before stay where they are.
	for (const { cellId, from, to } of [...places].sort((a, b) => b.from - a.from)) {
		const source = texts.get(cellId);
		if (!source || !expected(source.toJSON().slice(from, to))) continue;
		source.delete(from, to - from);
		source.insert(from, text);
		count += 1;
	}
	return count;
}
