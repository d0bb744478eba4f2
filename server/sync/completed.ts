import { cellsByClient } from '$lib/note/touched';
import type { Doc } from 'yjs';

/**
 * Others than the person whose earlier edits have come to count since a document's state `before`, and the cells those
 * lie in: they wrote there, although somebody else's edit brought what was missing.
 */
export function completedSince(
	doc: Doc,
	before: ReadonlyMap<number, number>,
	{ personId, owners }: { personId: string; owners: ReadonlyMap<number, string> },
): { personId: string; cells: string[] }[] {
	return [...cellsByClient(doc, before)].flatMap(([client, cells]) => {
		const owner = owners.get(client);
		return owner && owner !== personId ? [{ personId: owner, cells: [...cells] }] : [];
	});
}
