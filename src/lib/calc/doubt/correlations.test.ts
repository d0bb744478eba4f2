import { describe, expect, it } from 'vitest';
import { correlate } from './correlations';

const pair = (first: number, second: number, coefficient: number) => ({
	first,
	second,
	coefficient,
});

describe('Correlations', () => {
	it.each([
		['beyond one', [pair(0, 1, 1.01)], 'coefficient', 0],
		['that are no number', [pair(0, 1, NaN)], 'coefficient', 0],
		['of a quantity with itself', [pair(0, 1, 0.5), pair(2, 2, 1)], 'itself', 1],
		['stated twice', [pair(0, 1, 0.5), pair(1, 0, 0.5)], 'twice', 1],
		[
			'that contradict each other',
			[pair(0, 1, 0.9), pair(1, 2, 0.9), pair(0, 2, -0.9)],
			'impossible',
			2,
		],
		[
			'of one and minus one in a ring',
			[pair(0, 1, 1), pair(1, 2, 1), pair(0, 2, 0.5)],
			'impossible',
			2,
		],
	])('%s are a fault', (_, pairs, fault, index) => {
		expect(correlate(pairs)).toMatchObject({ fault, index });
	});

	it('may be complete, of either sign', () => {
		const made = correlate([pair(4, 2, 1), pair(2, 7, -1), pair(4, 7, -1)]);
		expect(made).toMatchObject({ groups: [{ members: Int32Array.of(2, 4, 7) }] });
	});

	it('fall into groups that do not touch', () => {
		const made = correlate([pair(0, 1, 0.5), pair(5, 6, -0.2)]);
		expect('groups' in made && made.groups.map(({ members }) => [...members])).toEqual([
			[0, 1],
			[5, 6],
		]);
	});
});
