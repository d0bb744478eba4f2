import { expect, test } from 'vitest';
import * as Y from 'yjs';
import { undoManagerOf } from '$lib/client/undo';
import { placedCells, seedContent, toContent } from './document';
import { formulasOf, misfitsOf, withChanges, writeChanges } from './trial';

function noteOf(...sources: string[]) {
	const doc = new Y.Doc();
	const cells = sources.map((source) => ({ kind: 'calculation' as const, source }));
	seedContent(doc, { title: '', cells: [...cells, { kind: 'text', source: 'R1 = 5 in words' }] });
	return doc;
}
const sources = (doc: Y.Doc) => toContent(doc).cells.map(({ source }) => source);
const change = (name: string, from: string, to: string) => ({ name, from, to });

test('the formula of a line stands between its name and its comment', () => {
	const cells = placedCells(
		noteOf('# R1 = 1\nR1 = 10 kohm  # upper\nf(x) = x\nk=R1 == 2', 'R1 = 2'),
	);
	const found = [...formulasOf(cells)].map(([name, { line, formula }]) => [name, line, formula]);
	expect(found).toEqual([
		['R1', 2, '10 kohm'],
		['k', 4, 'R1 == 2'],
	]);
});

test('a trial changes formulas of a copy and says which names are gone', () => {
	const doc = noteOf('R1 = 10 kohm # upper\nR2 = 1 kohm', 'Vin = 5 V');
	const before = sources(doc);
	const { cells, gone } = withChanges(placedCells(doc), [
		change('R2', '1 kohm', '1.2 kohm'),
		change('R1', '10 kohm', 'tolerance(11 kohm, 1 %)'),
		change('X', '1', '2'),
	]);
	expect(cells.map(({ source }) => source).slice(0, 2)).toEqual([
		'R1 = tolerance(11 kohm, 1 %) # upper\nR2 = 1.2 kohm',
		'Vin = 5 V',
	]);
	expect(gone).toEqual(['X']);
	expect(sources(doc)).toEqual(before);
});

test('a trial is written as one change to undo, beside what others type, or not at all', () => {
	const doc = noteOf('R1 = 10 kohm # upper\nR2 = 1 kohm', 'Vin = 5 V');
	const before = sources(doc);
	const undo = undoManagerOf(doc, 'here');
	const trial = [change('R1', '10 kohm', '12 kohm'), change('Vin', '5 V', '6 V')];
	const peer = new Y.Doc();
	Y.applyUpdate(peer, Y.encodeStateAsUpdate(doc));
	placedCells(peer)[0]!.text.insert(0, 'x = 1\n');
	expect(doc.transact(() => writeChanges(doc, trial), 'here')).toEqual([]);
	Y.applyUpdate(doc, Y.encodeStateAsUpdate(peer));
	expect(sources(doc).slice(0, 2)).toEqual([
		'x = 1\nR1 = 12 kohm # upper\nR2 = 1 kohm',
		'Vin = 6 V',
	]);
	undo.undo();
	expect(sources(doc).slice(0, 2)).toEqual([`x = 1\n${before[0]}`, before[1]]);

	const late = [...trial, change('R2', '2 kohm', '3 kohm'), change('X', '1', '2')];
	const untouched = sources(doc);
	expect(writeChanges(doc, late)).toEqual([
		{ name: 'R2', now: '1 kohm' },
		{ name: 'X', now: undefined },
	]);
	expect(sources(doc)).toEqual(untouched);
	expect(misfitsOf(placedCells(doc), trial)).toEqual([]);
});
