import { expect, test } from 'vitest';
import type { NoteCell } from '$lib/note/document';
import { find } from './find';
import { definitionOf, usesOf, wordsOf } from './uses';

const cells: NoteCell[] = [
	{
		id: 'a',
		kind: 'calculation',
		source: 'R1 = 10 kohm # R1 is the upper arm\nratio = R1 / (R1 + R12)\ntwice(R1) = 2 * R1',
	},
	{ id: 'b', kind: 'requirement', source: 'ratio <= R1 / 1 kohm' },
	{ id: 'c', kind: 'text', source: 'Upper {{R1}}, {{ R1 : kohm }}, {{R12}} and R1.' },
];
const isUnit = (typed: string) => ['C', 'nF', 'kohm'].includes(typed);
const texts = (places: { cellId: string; from: number; to: number }[]) =>
	places.map(({ cellId, from, to }) => {
		const { source } = cells.find(({ id }) => id === cellId)!;
		return `${cellId}${from}:${source.slice(from, to)}`;
	});

test('a quantity is found where it is defined, used and quoted, and nowhere else', () => {
	expect(texts(usesOf(cells, 'R1', isUnit))).toEqual([
		'a0:R1',
		'a43:R1',
		'a49:R1',
		'b9:R1',
		'c8:R1',
		'c17:R1',
	]);
});

test('the value of a function hides the quantity of its name, the function itself is found', () => {
	expect(texts(usesOf(cells, 'twice', isUnit))).toEqual(['a59:twice']);
	const own: NoteCell[] = [{ id: 'f', kind: 'calculation', source: 'f(f) = f + 1\ny = f(2)' }];
	expect(usesOf(own, 'f', isUnit).map(({ from }) => from)).toEqual([0, 17]);
});

test('a Greek name is the same by sign and by word', () => {
	const greek: NoteCell[] = [
		{ id: 'g', kind: 'calculation', source: 'δ_gain = 1 %\ny = delta_gain' },
	];
	expect(usesOf(greek, 'delta_gain', isUnit)).toHaveLength(2);
	expect(definitionOf(greek, 'delta_gain')).toMatchObject({ line: 1, from: 0, to: 6 });
});

test('the symbol behind a number is a unit, even where a quantity has its name', () => {
	const own: NoteCell[] = [{ id: 'u', kind: 'calculation', source: 'C = 10 nF\ny = 5 C + C' }];
	expect(usesOf(own, 'C', isUnit).map(({ from }) => from)).toEqual([0, 20]);
	const twice: NoteCell[] = [{ id: 'u', kind: 'calculation', source: 'R1 = 3\ny = 2 R1' }];
	expect(usesOf(twice, 'R1', isUnit)).toHaveLength(2);
	expect(wordsOf('y = 5 C + C').map(({ kind }) => kind)).toEqual(['name', 'unit', 'name']);
});

test('a definition is found by its cell and line', () => {
	expect(definitionOf(cells, 'ratio')).toMatchObject({ cellId: 'a', terminal: 1, line: 2 });
	expect(definitionOf(cells, 'nothing')).toBeUndefined();
});

test.each([
	[{ text: 'R1', matchCase: true, wholeName: true }, 10],
	[{ text: 'R1', matchCase: true, wholeName: false }, 12],
	[{ text: 'r1', matchCase: true, wholeName: false }, 0],
	[{ text: 'UPPER', matchCase: false, wholeName: true }, 2],
	[{ text: '(R1 + R12)', matchCase: false, wholeName: false }, 1],
	[{ text: '', matchCase: false, wholeName: false }, 0],
])('%j is found %i times', (question, count) => {
	expect(find(cells, question)).toHaveLength(count);
});
