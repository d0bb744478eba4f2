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
