import { takeUpdates } from '$lib/note/take-updates';
import * as Y from 'yjs';

/**
 * Edits of three pages to a text behind what stands in it, so that each needs one before; in an order in which two of
 * the pages changed the process, and what they wrote before comes behind what they wrote after. With Yjs alone (13.6)
 * they wait for each other for good.
 */
export function outOfOrder(base: Uint8Array, name: string) {
	const end = (piece: string) => (text: Y.Text) => text.insert(text.length, piece);
	const behind = (what: string, piece: string) => (text: Y.Text) =>
		text.insert(text.toString().indexOf(what) + what.length, piece);
	const ab = written(3, [base], end('ab'));
	const first = written(4, [base], (text) => text.insert(0, '<'));
	const cd = written(2, [base, ab], end('cd'));
	const inside = written(3, [base, ab, cd], behind('abc', '..'));
	const efg = written(4, [base, first, ab, cd], end('efg'));
	const hi = written(2, [base, ab, cd, first, efg], end('hi'));
	const between = written(3, [base, first, ab, cd, inside, efg, hi], behind('efg', '--'));
	return {
		updates: [cd, efg, between, first, ab, inside, hi],
		whole: (text: string) => `<${text}abc..defg--hi`,
	};

	/** What a page with this client id writes once it has seen those updates. */
	function written(
		clientID: number,
		seen: readonly Uint8Array[],
		change: (text: Y.Text) => void,
	): Uint8Array {
		const doc = new Y.Doc();
		takeUpdates(doc, seen, 'seen');
		// Afterwards: a document that hears of its own client id takes another one.
		doc.clientID = clientID;
		const known = Y.encodeStateVector(doc);
		change(doc.getText(name));
		return Y.encodeStateAsUpdate(doc, known);
	}
}
