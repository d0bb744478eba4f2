import fc from 'fast-check';
import { expect, test } from 'vitest';
import * as Y from 'yjs';
import { noteOf, replicaOf } from '../../../tests/support/documents';
import { anchorOf, stretchOf } from './anchor';
import { placedCells, seedContent } from './document';

const textIn = (doc: Y.Doc) => placedCells(doc)[0]!.text;
const source = 'The upper arm stays at 470 kohm.';

/** An anchor on words of a note's only cell, and what the words are at any time. */
function anchored(words: string, written = source) {
	const doc = noteOf(written);
	const text = textIn(doc);
	const from = written.indexOf(words);
	const anchor = anchorOf(text, { from, to: from + words.length }, 'words');
	const now = (of = text) => {
		const found = stretchOf(anchor, of.toJSON(), of);
		return found && of.toJSON().slice(found.from, found.to);
	};
	return { doc, text, anchor, now };
}

test('a stretch keeps its words while others are written around them', () => {
	const { text, now } = anchored('470 kohm');
	text.insert(0, 'Note: ');
	text.insert(text.length, ' See below.');
	text.delete(6, 4);
	expect(now()).toBe('470 kohm');
	text.insert(text.toJSON().indexOf('470'), '>');
	expect(now()).toBe('470 kohm');
});

test('a stretch that is mended within is still there, with what was written', () => {
	const { text, now } = anchored('470 kohm');
	const at = text.toJSON().indexOf('470');
	text.delete(at + 1, 1);
	text.insert(at + 1, '3');
	expect(now()).toBe('430 kohm');
});

test('a stretch that was deleted is gone, also where its words stand elsewhere by chance', () => {
	const { text, now } = anchored('470 kohm');
	text.delete(text.toJSON().indexOf('470'), 8);
	expect(now()).toBeUndefined();
	text.insert(0, '470 kohm ');
	expect(now()).toBeUndefined();
});

test('in a document of another life the words are found by their quotation, if they stand there once', () => {
	const { anchor } = anchored('470 kohm');
	const restored = new Y.Doc();
	seedContent(restored, { title: '', cells: [{ kind: 'calculation', source }] });
	expect(stretchOf(anchor, source, textIn(restored))).toEqual({ from: 23, to: 31 });
	const twice = noteOf(`${source} ${source}`);
	expect(stretchOf(anchor, textIn(twice).toJSON(), textIn(twice))).toBeUndefined();
	expect(stretchOf(anchor, source)).toEqual({ from: 23, to: 31 });
	expect(stretchOf(anchor, 'Nothing of it.')).toBeUndefined();
	expect(stretchOf({ ...anchor, start: 'AAAA', end: '////' }, source, textIn(restored))).toEqual({
		from: 23,
		to: 31,
	});
});

test('whatever two people write at once, both find the same stretch', () => {
	const edit = fc.record({
		at: fc.nat(40),
		remove: fc.nat(6),
		insert: fc.string({ maxLength: 5 }),
	});
	const apply = (text: Y.Text, edits: { at: number; remove: number; insert: string }[]) => {
		for (const { at, remove, insert } of edits) {
			const from = Math.min(at, text.length);
			text.delete(from, Math.min(remove, text.length - from));
			text.insert(from, insert);
		}
	};
	fc.assert(
		fc.property(fc.array(edit), fc.array(edit), (mine, theirs) => {
			const { doc, text, anchor } = anchored('arm stays');
			const other = replicaOf(doc);
			apply(text, mine);
			apply(textIn(other), theirs);
			Y.applyUpdate(other, Y.encodeStateAsUpdate(doc));
			Y.applyUpdate(doc, Y.encodeStateAsUpdate(other));
			const here = stretchOf(anchor, text.toJSON(), text);
			expect(stretchOf(anchor, text.toJSON(), textIn(other))).toEqual(here);
			if (here) expect(here.from).toBeLessThan(here.to);
		}),
	);
});
