import * as Y from 'yjs';
import { cellsOf, isCellId } from './document';

/**
 * Cells that came, went or changed their text while `change` ran. A cell that only moved is none of them: who moves
 * it has written nothing in it.
 */
export function touchedBy(doc: Y.Doc, change: () => void): string[] {
	const touched = new Set<string>();
	const note = (events: Y.YEvent<Y.AbstractType<unknown>>[]) => {
		for (const event of events) for (const id of cellsIn(event)) touched.add(id);
	};
	const cells = cellsOf(doc);
	cells.observeDeep(note);
	try {
		change();
	} finally {
		cells.unobserveDeep(note);
	}
	return [...touched].filter(isCellId);
}

function cellsIn(event: Y.YEvent<Y.AbstractType<unknown>>): string[] {
	const [id] = event.path;
	if (id === undefined) return [...event.changes.keys.keys()];
	const moved =
		event.path.length === 1 && [...event.changes.keys.keys()].every((key) => key === 'order');
	return moved ? [] : [String(id)];
}

/** Yjs client ids whose content an update holds. */
export function clientsIn(update: Uint8Array): number[] {
	return [...Y.parseUpdateMeta(update).from.keys()];
}
