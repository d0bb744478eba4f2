import * as Y from 'yjs';
import { cellKinds, cellsOf, isCellId, isOrderKey, placedCells, titleOf } from './document';
import { isDisplay, isShownName, shownOf } from './shown';

const roots = ['title', 'cells', 'shown'];

/**
 * The first thing of a transaction that no note holds, in words; undefined where all is as `document.ts` describes
 * it. It looks at what is new, however large the document is. Call it before Yjs tidies up, in `afterTransaction`.
 */
export function strangenessOf(transaction: Y.Transaction): string | undefined {
	const { doc, beforeState, afterState } = transaction;
	// Yjs gives a root its type when it is first asked for, and the items in it another parent then.
	titleOf(doc);
	cellsOf(doc);
	shownOf(doc);
	for (const [client, after] of afterState) {
		const before = beforeState.get(client) ?? 0;
		const structs = doc.store.clients.get(client);
		if (!structs || before === after) continue;
		for (let index = Y.findIndexSS(structs, before); index < structs.length; index += 1) {
			const struct = structs[index];
			const strange = struct instanceof Y.Item && whatIsStrange(doc, struct);
			if (strange) return strange;
		}
	}
	return undefined;
}

/** How many things a document holds that no note does, or that are half a cell; they count for nothing. */
export function countStrange(doc: Y.Doc): number {
	const others = [...doc.share.keys()].filter((name) => !roots.includes(name));
	return others.length + cellsOf(doc).size - placedCells(doc).length;
}

function whatIsStrange(doc: Y.Doc, { parent, parentSub, content }: Y.Item): string | undefined {
	if (content instanceof Y.ContentDeleted || !(parent instanceof Y.AbstractType)) return undefined;
	if (parent === titleOf(doc))
		return isPlain(content) ? undefined : 'a title that is no plain text';
	if (parent === shownOf(doc))
		return isShown(parentSub, content) ? undefined : 'a readout set as none can be';
	const cells = cellsOf(doc);
	if (parent === cells) {
		const isCell =
			isCellId(parentSub ?? '') &&
			content instanceof Y.ContentType &&
			content.type instanceof Y.Map;
		return isCell ? undefined : 'a cell without a proper id or shape';
	}
	const holder = parent._item;
	if (!holder) return 'content beside title and cells';
	if (holder.parent === cells)
		return isField(parentSub, content) ? undefined : 'an unknown field of a cell';
	const grandparent = holder.parent instanceof Y.AbstractType ? holder.parent._item : null;
	if (grandparent?.parent !== cells || holder.parentSub !== 'source')
		return 'content within content';
	return isPlain(content) ? undefined : 'a source that is no plain text';
}

function isShown(name: string | null, content: Y.Item['content']): boolean {
	return (
		isShownName(name ?? '') &&
		content instanceof Y.ContentAny &&
		content.arr.length === 1 &&
		isDisplay(content.arr[0])
	);
}

function isPlain(content: Y.Item['content']): boolean {
	return content instanceof Y.ContentString;
}

/** Whether a cell may have such a field. */
function isField(name: string | null, content: Y.Item['content']): boolean {
	if (name === 'source') return content instanceof Y.ContentType && content.type instanceof Y.Text;
	if (!(content instanceof Y.ContentAny) || content.arr.length !== 1) return false;
	const value: unknown = content.arr[0];
	if (name === 'kind') return cellKinds.some((kind) => kind === value);
	return name === 'order' && isOrderKey(value);
}
