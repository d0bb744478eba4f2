import fc from 'fast-check';
import { expect, test } from 'vitest';
import * as Y from 'yjs';
import {
	addCell,
	cellsOf,
	duplicateCell,
	moveCell,
	placedCells,
	removeCell,
	titleOf,
	toContent,
} from './document';
import { noteOf, replicaOf } from '../../../tests/support/documents';

function exchange(...docs: Y.Doc[]): void {
	for (const from of docs) {
		for (const to of docs) {
			if (from !== to) Y.applyUpdate(to, Y.encodeStateAsUpdate(from, Y.encodeStateVector(to)));
		}
	}
}

const sources = (doc: Y.Doc) => toContent(doc).cells.map(({ source }) => source);
const ids = (doc: Y.Doc) => placedCells(doc).map(({ id }) => id);

test('a seeded document holds title and cells in the order given', () => {
	const doc = noteOf('a', 'b', 'c');
	expect(toContent(doc).title).toBe('Divider');
	expect(sources(doc)).toEqual(['a', 'b', 'c']);
});

test('cells are added at the top, behind another one, and at the end', () => {
	const doc = noteOf('a', 'b');
	const [a, b] = ids(doc) as [string, string];
	addCell(doc, 'text', null, 'top');
	addCell(doc, 'requirement', a, 'between');
	addCell(doc, 'text', b, 'end');
	expect(sources(doc)).toEqual(['top', 'a', 'between', 'b', 'end']);
});

test('a copy stands behind its cell with its kind and source, and is a cell of its own', () => {
	const doc = noteOf('a', 'b');
	const copy = duplicateCell(doc, ids(doc)[0]!);
	placedCells(doc)[0]!.text.insert(1, '!');
	expect(sources(doc)).toEqual(['a!', 'a', 'b']);
	expect(ids(doc)[1]).toBe(copy);
	expect(duplicateCell(doc, 'nowhere')).toBeUndefined();
});

test('a removed cell is gone', () => {
	const doc = noteOf('a', 'b');
	removeCell(doc, ids(doc)[0]!);
	expect(sources(doc)).toEqual(['b']);
});

test('a cell that two people move at once stays one cell, with what a third typed into it meanwhile', () => {
	const one = noteOf('a', 'b', 'c', 'd');
	const two = replicaOf(one);
	const three = replicaOf(one);
	const [a, , , d] = ids(one) as [string, string, string, string];
	moveCell(one, a, d);
	moveCell(two, a, ids(two)[1]!);
	placedCells(three)[0]!.text.insert(1, '!');
	exchange(one, two, three);
	exchange(one, two, three);
	expect(sources(one)).toEqual(sources(two));
	expect(sources(one)).toEqual(sources(three));
	expect(sources(one).filter((source) => source === 'a!')).toHaveLength(1);
	expect(sources(one)).toHaveLength(4);
});

test('a cell can be put between two that two people added to one place at once', () => {
	const one = noteOf('a');
	const two = replicaOf(one);
	const [a] = ids(one) as [string];
	addCell(one, 'text', a, 'x');
	addCell(two, 'text', a, 'y');
	exchange(one, two);
	const [, first, second] = ids(one) as [string, string, string];
	const added = addCell(one, 'text', first, 'between');
	expect(ids(one)).toEqual([a, first, added, second]);
});

const step = fc.record({
	who: fc.nat(2),
	deed: fc.constantFrom('add', 'move', 'duplicate', 'remove', 'type', 'exchange'),
	cell: fc.nat(20),
	to: fc.integer({ min: -1, max: 20 }),
});

test('whatever three people do at once, all see the same cells in the same order, each once', () => {
	fc.assert(
		fc.property(fc.array(step, { maxLength: 40 }), (steps) => {
			const first = noteOf('a', 'b', 'c');
			const docs = [first, replicaOf(first), replicaOf(first)];
			for (const { who, deed, cell, to } of steps) {
				const doc = docs[who]!;
				const placed = placedCells(doc);
				const chosen = placed[cell % Math.max(1, placed.length)];
				const after = to < 0 ? null : (placed[to % Math.max(1, placed.length)]?.id ?? null);
				if (deed === 'exchange') exchange(...docs);
				else if (deed === 'add') addCell(doc, 'text', after, 'new');
				else if (!chosen) continue;
				else if (deed === 'move') {
					moveCell(doc, chosen.id, after);
					const order = ids(doc);
					// Where it was told to go is where it is.
					if (after !== chosen.id) {
						expect(order.indexOf(chosen.id)).toBe(after === null ? 0 : order.indexOf(after) + 1);
					}
				} else if (deed === 'duplicate') duplicateCell(doc, chosen.id);
				else if (deed === 'remove') removeCell(doc, chosen.id);
				else chosen.text.insert(0, 'x');
			}
			exchange(...docs);
			exchange(...docs);
			const [one, two, three] = docs.map((doc) => toContent(doc));
			expect(two).toEqual(one);
			expect(three).toEqual(one);
			expect(new Set(one!.cells.map(({ id }) => id)).size).toBe(one!.cells.length);
			expect(one!.cells).toHaveLength(cellsOf(docs[0]!).size);
		}),
		{ numRuns: 150 },
	);
});

test('what is no cell of a known kind and shape is left out', () => {
	const doc = noteOf('a');
	const cells = doc.getMap('cells');
	cells.set('text', 'a string');
	cells.set('UPPER', new Y.Map<unknown>([['kind', 'text']]));
	cells.set(
		'kind',
		new Y.Map<unknown>([
			['kind', 'song'],
			['order', 'a5'],
			['source', new Y.Text('x')],
		]),
	);
	cells.set(
		'order',
		new Y.Map<unknown>([
			['kind', 'text'],
			['order', 'not a key'],
			['source', new Y.Text('x')],
		]),
	);
	cells.set(
		'source',
		new Y.Map<unknown>([
			['kind', 'text'],
			['order', 'a5'],
			['source', 'x'],
		]),
	);
	doc.getMap('other').set('key', 1);
	titleOf(doc).insertEmbed(0, { image: 'x' });
	expect(toContent(doc)).toMatchObject({ title: 'Divider', cells: [{ source: 'a' }] });
});
