import { expect, test } from 'vitest';
import type { Evaluation, Sweep } from '$lib/calc/results';
import { sweepChanges } from './sweeps';

/** A picture of V over I at some points, with one place where it passes its upper limit. */
function results(values: number[], crossing: number, x = [0, 1, 2]): Evaluation {
	const sweep: Sweep = {
		cell: 'p1',
		line: 1,
		over: {
			name: 'I',
			unit: 'A',
			shown: { factor: 1e3, unit: 'mA' },
			present: 1,
			presentText: '1 A',
		},
		logarithmic: false,
		x,
		unit: 'V',
		shown: { factor: 1, unit: 'V' },
		series: [{ name: 'V', values, presentText: '', present: null }],
		limits: [
			{
				cell: 'r1',
				line: 1,
				name: 'V',
				lower: null,
				upper: [3],
				lowerText: null,
				upperText: '3 V',
				stretches: [],
				crossings: [{ x: crossing, limit: 'upper', text: `at ${crossing} A` }],
				text: '',
			},
		],
	};
	return {
		engine: '',
		quantities: {},
		lines: [],
		requirements: [],
		figures: [],
		errors: [],
		sweeps: [sweep],
	};
}

test('a picture tells how many of its points moved, and its crossings before and after', () => {
	expect(sweepChanges(results([1, 2, 3], 2), results([1, 2.5, 4], 1.5))).toEqual([
		{
			title: 'V over I',
			change: 'moved',
			range: null,
			series: [{ name: 'V', change: 'moved', moved: 2, points: 3 }],
			crossings: [{ name: 'V', limit: 'upper', from: 'at 2 A', to: 'at 1.5 A' }],
			place: { cell: 'p1', line: 1 },
		},
	]);
	expect(sweepChanges(results([1, 2, 3], 2), results([1, 2, 3], 2))).toEqual([]);
});

test('another range is told as such, because its points are others', () => {
	const [change] = sweepChanges(results([1, 2, 3], 2), results([1, 2, 3], 2, [0, 2, 4]));
	expect(change?.range).toEqual({
		from: 'I from 0 to 2000\u00a0mA, 3 points',
		to: 'I from 0 to 4000\u00a0mA, 3 points',
	});
	expect(change?.series).toEqual([]);
});

test('a picture that one side lacks came or went', () => {
	const none = { ...results([], 0), sweeps: [] };
	expect(sweepChanges(none, results([1, 2, 3], 2))).toMatchObject([{ change: 'added' }]);
	expect(sweepChanges(results([1, 2, 3], 2), none)).toMatchObject([{ change: 'removed' }]);
});
