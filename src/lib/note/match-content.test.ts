import fc from 'fast-check';
import { expect, test } from 'vitest';
import * as Y from 'yjs';
import {
	addCell,
	cellsOf,
	matchContent,
	moveCell,
	placedCells,
	removeCell,
	titleOf,
	toContent,
} from './document';
import { noteOf, replicaOf } from '../../../tests/support/documents';

const steps = fc.array(
	fc.record({
		deed: fc.constantFrom('add', 'move', 'remove', 'type', 'title'),
		cell: fc.nat(20),
		to: fc.nat(20),
		text: fc.string({ unit: fc.constantFrom('a', 'b', 'é', '\u{1f50c}', '\n'), maxLength: 5 }),
	}),
	{ maxLength: 25 },
);

function follow(
	doc: Y.Doc,
	what: Iterable<{ deed: string; cell: number; to: number; text: string }>,
) {
	for (const { deed, cell, to, text } of what) {
		const placed = placedCells(doc);
		const chosen = placed[cell % Math.max(1, placed.length)];
		const after = placed[to % Math.max(1, placed.length)]?.id ?? null;
		if (deed === 'add') addCell(doc, 'text', after, text);
		else if (deed === 'title') titleOf(doc).insert(0, text);
		else if (!chosen) continue;
		else if (deed === 'move') moveCell(doc, chosen.id, after);
		else if (deed === 'remove') removeCell(doc, chosen.id);
		else chosen.text.insert(0, text);
	}
}

test('a document says again what it said at any moment before, and undo takes that back', () => {
	fc.assert(
		fc.property(steps, steps, (first, then) => {
			const doc = noteOf('a', 'b', 'c');
			follow(doc, first);
			const wanted = toContent(doc);
			follow(doc, then);
			const before = toContent(doc);
			const undo = new Y.UndoManager([titleOf(doc), cellsOf(doc)] as Y.AbstractType<unknown>[], {
				trackedOrigins: new Set(['restore']),
			});
			doc.transact(() => matchContent(doc, wanted), 'restore');
			expect(toContent(doc)).toEqual(wanted);
			undo.undo();
			expect(toContent(doc)).toEqual(before);
		}),
		{ numRuns: 150 },
	);
});

test('what is the same already makes no change', () => {
	const doc = noteOf('a', 'b');
	let changes = 0;
	doc.on('update', () => (changes += 1));
	matchContent(doc, toContent(doc));
	expect(changes).toBe(0);
});

test('what others wrote meanwhile in a cell that comes back stays, once', () => {
	const one = noteOf('first line\n', 'other');
	const wanted = toContent(one);
	placedCells(one)[0]!.text.insert(0, 'wrong ');
	const two = replicaOf(one);
	placedCells(two)[0]!.text.insert(placedCells(two)[0]!.text.length, 'typed offline\n');
	matchContent(one, wanted);
	for (const [from, to] of [
		[one, two],
		[two, one],
	] as const) {
		Y.applyUpdate(to, Y.encodeStateAsUpdate(from));
	}
	expect(toContent(one)).toEqual(toContent(two));
	expect(toContent(one).cells[0]!.source).toBe('first line\ntyped offline\n');
});
