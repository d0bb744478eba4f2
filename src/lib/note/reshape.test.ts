import { expect, test } from 'vitest';
import * as Y from 'yjs';
import { placedCells, seedContent, toContent, type CellKind } from './document';
import { changeKind, joinCells, splitCell } from './reshape';

function noteOf(...cells: [CellKind, string][]): { doc: Y.Doc; ids: string[] } {
	const doc = new Y.Doc();
	seedContent(doc, { title: '', cells: cells.map(([kind, source]) => ({ kind, source })) });
	return { doc, ids: placedCells(doc).map(({ id }) => id) };
}
const sources = (doc: Y.Doc) => toContent(doc).cells.map(({ source }) => source);

test('formulas are cut before the line of the cursor, text at the cursor itself', () => {
	const { doc, ids } = noteOf(['calculation', 'a = 1\nb = 2\nc = 3'], ['text', 'one two']);
	expect(splitCell(doc, ids[0]!, 9)).toBeDefined();
	expect(splitCell(doc, ids[1]!, 3)).toBeDefined();
	expect(sources(doc)).toEqual(['a = 1', 'b = 2\nc = 3', 'one', ' two']);
	expect(toContent(doc).cells.map(({ kind }) => kind)).toEqual([
		'calculation',
		'calculation',
		'text',
		'text',
	]);
});

test('nothing is cut off that would leave an empty cell', () => {
	const { doc, ids } = noteOf(['calculation', 'a = 1\nb = 2'], ['text', 'words\n\n']);
	expect(splitCell(doc, ids[0]!, 3)).toBeUndefined();
	expect(splitCell(doc, ids[1]!, 5)).toBeUndefined();
	expect(sources(doc)).toEqual(['a = 1\nb = 2', 'words\n\n']);
});

test('a cell takes the one below in, if it is of its kind', () => {
	const { doc, ids } = noteOf(['calculation', 'a = 1'], ['calculation', 'b = 2'], ['text', 't']);
	expect(joinCells(doc, ids[0]!)).toEqual({ id: ids[0], at: 6 });
	expect(sources(doc)).toEqual(['a = 1\nb = 2', 't']);
	expect(joinCells(doc, ids[0]!)).toBeUndefined();
	expect(joinCells(doc, ids[2]!)).toBeUndefined();
});

test('what was split is what it was when it is joined again', () => {
	const { doc, ids } = noteOf(['requirement', 'a < 1\nb < 2']);
	splitCell(doc, ids[0]!, 6);
	joinCells(doc, ids[0]!);
	expect(sources(doc)).toEqual(['a < 1\nb < 2']);
});

test('a cell of another kind keeps its place and its words', () => {
	const { doc, ids } = noteOf(['text', 'x'], ['text', 'y']);
	changeKind(doc, ids[0]!, 'calculation');
	expect(toContent(doc).cells).toMatchObject([
		{ id: ids[0], kind: 'calculation', source: 'x' },
		{ id: ids[1], kind: 'text', source: 'y' },
	]);
});
