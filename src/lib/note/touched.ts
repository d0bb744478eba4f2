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
	const keys = [...event.changes.keys.keys()];
	if (id === undefined) return keys;
	const moved = event.path.length === 1 && keys.every((key) => key === 'order');
	return moved ? [] : [String(id)];
}

/** The cells that each client's content lies in, of what a document has beyond an earlier state. */
export function cellsByClient(
	doc: Y.Doc,
	before: ReadonlyMap<number, number>,
): Map<number, Set<string>> {
	const found = new Map<number, Set<string>>();
	for (const [client, structs] of doc.store.clients) {
		const from = before.get(client) ?? 0;
		if (Y.getState(doc.store, client) <= from) continue;
		for (const struct of structs.slice(Y.findIndexSS(structs, from))) {
			const id = struct instanceof Y.Item ? cellOf(cellsOf(doc), struct) : undefined;
			if (id !== undefined) found.set(client, (found.get(client) ?? new Set()).add(id));
		}
	}
	return found;
}

function cellOf(cells: unknown, item: Y.Item): string | undefined {
	for (let at: Y.Item | null = item; at;) {
		if (!(at.parent instanceof Y.AbstractType)) return undefined;
		if (at.parent === cells) return at.parentSub ?? undefined;
		at = at.parent._item;
	}
	return undefined;
}

/** Yjs client ids whose content an update holds. */
export function clientsIn(update: Uint8Array): number[] {
	return [...Y.parseUpdateMeta(update).from.keys()];
}
