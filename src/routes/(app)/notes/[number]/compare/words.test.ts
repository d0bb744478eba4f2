import { expect, test } from 'vitest';
import type { Comparison } from '$lib/schemas/comparison';
import { comparing, inSentence, summary } from './words';

/** A comparison with as many changes of each kind. */
function found(counts: { inputs?: number; results?: number; turned?: number; texts?: number }) {
	const { inputs = 0, results = 0, turned = 0, texts = 0 } = counts;
	return {
		inputs: Array(inputs).fill({}),
		results: Array(results).fill({}),
		formulas: [],
		requirements: Array(turned).fill({ turned: true }),
		texts: Array(texts).fill({}),
		title: null,
	} as unknown as Comparison;
}

test.each([
	[
		{ inputs: 2, results: 4, turned: 1 },
		'Two inputs changed. Four results moved, one verdict turned.',
	],
	[{ inputs: 1 }, 'One input changed. No result moved.'],
	[{ results: 14 }, 'No input changed. 14 results moved.'],
	[{ texts: 1 }, 'No figure moved. One text changed.'],
	[{}, 'Both sides say the same, and give the same figures.'],
])('%o', (counts, expected) => {
	expect(summary(found(counts))).toBe(expected);
});

test('a side keeps its letter within a sentence and in an address', () => {
	expect(inSentence('Revision B')).toBe('revision B');
	const side = (key: string) => ({ key }) as Parameters<typeof comparing>[1];
	expect(comparing('MN-014', side('A'), side('working-copy'))).toBe(
		'/notes/MN-014/compare?from=A&to=working-copy',
	);
});
