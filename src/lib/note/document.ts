import { generateKeyBetween } from 'fractional-indexing';
import type { Display } from '$lib/calc/results';
import * as Y from 'yjs';
import { replaceText } from './replace-text';
import { matchShown, readShown } from './shown';

export const cellKinds = ['text', 'calculation', 'requirement', 'curve'] as const;
export type CellKind = (typeof cellKinds)[number];

/** A cell as everybody but the editor sees it: plain data, in sheet order. */
export interface NoteCell {
	id: string;
	kind: CellKind;
	source: string;
}

/** What a note's document holds, as plain data. */
export interface NoteContent {
	title: string;
	cells: NoteCell[];
	/** How readouts are set, by the name of the quantity (`shown.ts`); absent where nobody chose anything. */
	shown?: Record<string, Display>;
}

/** Longest order key; moving cells to and fro at one place makes keys longer. */
const maxOrderLength = 10_000;

/** Most characters one cell may hold. */
export const maxSourceLength = 100_000;

/**
 * Shared types of a note's document:
 * `title`: Y.Text; `cells`: Y.Map of cell id → Y.Map { kind: string, order: string, source: Y.Text }.
 * The sheet's order is that of `order` (fractional keys, so that a move changes one value), ties by id.
 */
export function titleOf(doc: Y.Doc): Y.Text {
	return doc.getText('title');
}

export function cellsOf(doc: Y.Doc): Y.Map<Y.Map<unknown>> {
	return doc.getMap<Y.Map<unknown>>('cells');
}

interface PlacedCell extends NoteCell {
	order: string;
	text: Y.Text;
}

/** Cells in sheet order with their Y.Text. What is not of the shape above, with a known kind, is left out. */
export function placedCells(doc: Y.Doc): PlacedCell[] {
	const placed: PlacedCell[] = [];
	for (const [id, entry] of cellsOf(doc)) {
		if (!isCellId(id) || !(entry instanceof Y.Map)) continue;
		const kind = entry.get('kind') as CellKind;
		const order = entry.get('order');
		const text = entry.get('source');
		if (!cellKinds.includes(kind) || !isOrderKey(order) || !(text instanceof Y.Text)) continue;
		placed.push({ id, kind, order, text, source: text.toJSON() });
	}
	return placed.sort((a, b) => compare(a.order, b.order) || compare(a.id, b.id));
}

/** Whether a key of `cells` can be a cell's id. */
export function isCellId(id: string): boolean {
	// A name that every object has would be found where no cell is.
	return /^[a-z0-9]{1,40}$/.test(id) && id !== 'constructor';
}

/** Whether a value can say where a cell stands. */
export function isOrderKey(order: unknown): order is string {
	if (typeof order !== 'string' || order.length === 0 || order.length > maxOrderLength)
		return false;
	try {
		generateKeyBetween(order, null);
		return true;
	} catch {
		return false;
	}
}

function compare(a: string, b: string): number {
	return a < b ? -1 : a > b ? 1 : 0;
}

/** The document as plain data, in sheet order. A null character, which the database cannot keep, becomes U+FFFD. */
export function toContent(doc: Y.Doc): NoteContent {
	const kept = (text: string) => text.replaceAll('\0', '\ufffd');
	const shown = readShown(doc);
	return {
		title: kept(titleOf(doc).toJSON()),
		cells: placedCells(doc).map(({ id, kind, source }) => ({
			id: kept(id),
			kind,
			source: kept(source),
		})),
		...(shown && { shown }),
	};
}

/** Adds a cell after the cell `after`, or first where it is null, and returns its id. */
export function addCell(doc: Y.Doc, kind: CellKind, after: string | null, source = ''): string {
	const id = newId();
	putCell(doc, { id, kind, source }, after);
	return id;
}

function putCell(doc: Y.Doc, { id, kind, source }: NoteCell, after: string | null): void {
	const entry = new Y.Map<unknown>();
	entry.set('kind', kind);
	entry.set('order', orderAfter(doc, after, id));
	entry.set('source', new Y.Text(source));
	cellsOf(doc).set(id, entry);
}

/** Moves a cell behind `after` (null: to the top). One key changes, so two movers never make two copies. */
export function moveCell(doc: Y.Doc, id: string, after: string | null): void {
	if (id === after) return;
	cellsOf(doc)
		.get(id)
		?.set('order', orderAfter(doc, after, id));
}

/** Puts a copy of a cell behind it and returns the copy's id; undefined where the cell is gone. */
export function duplicateCell(doc: Y.Doc, id: string): string | undefined {
	const cell = placedCells(doc).find((c) => c.id === id);
	return cell && addCell(doc, cell.kind, id, cell.source);
}

export function removeCell(doc: Y.Doc, id: string): void {
	cellsOf(doc).delete(id);
}

function orderAfter(doc: Y.Doc, after: string | null, moving: string): string {
	const others = placedCells(doc).filter((cell) => cell.id !== moving);
	const index = after === null ? -1 : others.findIndex((cell) => cell.id === after);
	const before = others[index]?.order ?? null;
	// Two people may have made equal keys at once; the next larger one keeps the order strict.
	const next = others.slice(index + 1).find((cell) => before === null || cell.order > before);
	return keyBetween(before, next?.order ?? null);
}

/**
 * A key between two others, at a place drawn at random: keys that two people make at once for the same gap
 * are then hardly ever equal, so that a third cell can always be put between theirs.
 */
function keyBetween(before: string | null, after: string | null): string {
	let low = generateKeyBetween(before, after);
	let high = generateKeyBetween(low, after);
	for (const byte of crypto.getRandomValues(new Uint8Array(24))) {
		const middle = generateKeyBetween(low, high);
		if (byte % 2 === 0) low = middle;
		else high = middle;
	}
	return low;
}

/** Short random identifier, 60 bits, of letters and digits. */
function newId(): string {
	const alphabet = 'abcdefghijkmnpqrstuvwxyz23456789';
	const bytes = crypto.getRandomValues(new Uint8Array(12));
	return Array.from(bytes, (byte) => alphabet[byte % 32]).join('');
}

/** Seeds an empty document. Only the server does so, once, in the transaction that creates the note. */
export function seedContent(
	doc: Y.Doc,
	content: { title: string; cells: Omit<NoteCell, 'id'>[] },
): void {
	doc.transact(() => {
		titleOf(doc).insert(0, content.title);
		let last: string | null = null;
		for (const cell of content.cells) last = addCell(doc, cell.kind, last, cell.source);
	});
}

/**
 * Makes a document say what `content` says, by changes like any others, in one transaction: what is the same already
 * is not touched, and a cell that was removed comes back under its id.
 */
export function matchContent(doc: Y.Doc, content: NoteContent): void {
	doc.transact(() => {
		replaceText(titleOf(doc), content.title);
		const wanted = new Set(content.cells.map(({ id }) => id));
		for (const { id } of placedCells(doc)) if (!wanted.has(id)) removeCell(doc, id);
		let last: string | null = null;
		for (const cell of content.cells) {
			const placed = placedCells(doc);
			const at = placed.findIndex(({ id }) => id === cell.id);
			const present = placed[at];
			if (present?.kind !== cell.kind) putCell(doc, cell, last);
			else {
				replaceText(present.text, cell.source);
				if ((placed[at - 1]?.id ?? null) !== last) moveCell(doc, cell.id, last);
			}
			last = cell.id;
		}
		matchShown(doc, content.shown ?? {});
	});
}
