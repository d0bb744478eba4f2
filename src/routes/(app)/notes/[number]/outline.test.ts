import { expect, test } from 'vitest';
import type { Evaluation } from '$lib/calc/results';
import { outlineOf } from './outline';

const none: Evaluation = {
	engine: '0',
	quantities: {},
	lines: [],
	requirements: [],
	figures: [],
	errors: [],
};

test('the outline lists headings of text cells with their terminals and leaves formulas alone', () => {
	const cells = [
		{ id: 'a', kind: 'text' as const, source: '## Purpose\n\nwords\n\n### Range' },
		{ id: 'b', kind: 'calculation' as const, source: '# parts\nR1 = 470 kohm' },
		{ id: 'c', kind: 'text' as const, source: 'Divider\n===' },
	];
	expect(outlineOf(cells, none)).toEqual([
		{ cellId: 'a', terminal: 1, level: 2, text: 'Purpose' },
		{ cellId: 'a', terminal: 1, level: 3, text: 'Range' },
		{ cellId: 'c', terminal: 3, level: 2, text: 'Divider' },
	]);
});

test('a heading follows its text and the figures it quotes', () => {
	const cell = { id: 'a', kind: 'text' as const, source: '' };
	const at = (text: string): Evaluation => {
		const readout = { text, number: text, unit: '' };
		const found = { cell: 'a', from: 7, to: 16, readout };
		return { ...none, figures: [found] };
	};
	const texts = (evaluation: Evaluation) => outlineOf([cell], evaluation).map(({ text }) => text);
	cell.source = '## Tap {{V_tap}}';
	expect(texts(at('2 V'))).toEqual(['Tap 2 V']);
	expect(texts(at('3 V'))).toEqual(['Tap 3 V']);
	cell.source = '## Tip {{V_tap}}';
	expect(texts(at('3 V'))).toEqual(['Tip 3 V']);
});
