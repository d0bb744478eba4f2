import { expect, test } from 'vitest';
import { defaultOptions, evaluate } from '$lib/calc/evaluate';
import { csvOf, readingAt } from './sweep-figures';
import { plotOf, wide } from './sweep-scale';

function drawn(curve: string, requirement = 'Vadc <= 2.45 V') {
	const source =
		'Vmax = 32 V\nR1 = tolerance(470 kohm, 0.1 %)\nR2 = 38.3 kohm\nVadc = Vmax * R2 / (R1 + R2)\nk1 = sqrt(Vmax / (1 V) - 1)';
	const { sweeps, errors } = evaluate(
		[
			{ id: 'a', kind: 'calculation', source },
			{ id: 'q', kind: 'requirement', source: requirement },
			{ id: 'c', kind: 'curve', source: curve },
		],
		defaultOptions,
	);
	expect(errors).toEqual([]);
	return sweeps![0]!;
}

test('a point is read with its doubt and verdict', () => {
	const sweep = drawn('Vadc over Vmax from 0 V to 40 V in 5 points');
	expect(readingAt(sweep, 3)).toBe('Vmax = 30\u00a0V: Vadc = 2.2605 ±\u00a00.0024\u00a0V, met');
	expect(readingAt(sweep, 4)).toBe('Vmax = 40\u00a0V: Vadc = 3.0140 ±\u00a00.0032\u00a0V, not met');
	expect(readingAt(drawn('k1 over Vmax from 0 V to 2 V in 3 points'), 0)).toBe(
		'Vmax = 0\u00a0V: k1 = no value',
	);
});

test('the table of points is RFC 4180, unrounded, with units in its head', () => {
	const rows = csvOf(drawn('Vadc over Vmax from 0 V to 40 V in 3 points')).split('\r\n');
	expect(rows).toHaveLength(5);
	expect(rows[0]).toBe(
		'"Vmax (V)","Vadc (V)","Vadc expanded uncertainty (V)","Vadc lowest (V)","Vadc highest (V)"',
	);
	expect(Number(rows[2]!.split(',')[1])).toBeCloseTo((20 * 38.3) / 508.3, 12);
	expect(csvOf(drawn('k1 over Vmax from 0 V to 2 V in 3 points')).split('\r\n')[1]).toBe('0,');
});

test('a picture holds its curve, the limit with what lies beyond it, and the present point', () => {
	const plot = plotOf(drawn('Vadc over Vmax from 0 V to 40 V'), wide);
	const right = wide.width - wide.right;
	expect([plot.xAt[0], plot.xAt.at(-1)]).toEqual([wide.left, right]);
	expect(plot.xTicks.map(({ text }) => text)).toEqual([
		'0',
		'5',
		'10',
		'15',
		'20',
		'25',
		'30',
		'35',
		'40',
	]);
	expect(plot.limits).toHaveLength(1);
	expect(plot.limits[0]!.text).toBe('2.45\u00a0V');
	expect(plot.toY(2.45)).toBeCloseTo(plot.limits[0]!.at.y, 6);
	expect(plot.present!.x).toBeCloseTo(wide.left + 0.8 * (right - wide.left), 6);
	expect(plot.stretches[0]!.map(({ verdict }) => verdict)).toEqual(['met', 'undecided', 'not met']);
	expect(plot.series[0]!.band).toMatch(/^M.*Z$/);
});

test('a limit that is far away is left out of the picture, and a gap parts the line', () => {
	expect(plotOf(drawn('Vadc over Vmax from 0 V to 40 V', 'Vadc <= 2000 V'), wide).limits).toEqual(
		[],
	);
	const { line } = plotOf(drawn('k1 over Vmax from 0 V to 2 V in 5 points'), wide).series[0]!;
	expect(line.match(/M/g)).toHaveLength(1);
	expect(line.match(/L/g)).toHaveLength(2);
});

test('a trial lies in the picture of the present curve; where its unit is another, it does not', () => {
	const present = drawn('Vadc over Vmax from 0 V to 40 V in 3 points');
	const higher = {
		...present,
		series: present.series.map((one) => ({
			...one,
			values: one.values.map((value) => (value ?? 0) * 4),
		})),
	};
	const [alone, both] = [plotOf(present, wide), plotOf(present, wide, higher)];
	expect(alone.tried).toEqual([]);
	expect(both.tried).toHaveLength(1);
	const end = both.tried[0]!.split('L').at(-1)!.split(' ').map(Number);
	expect(end[0]).toBe(both.xAt[2]);
	expect(end[1]).toBeCloseTo(both.toY(higher.series[0]!.values[2]!), 1);
	expect(end[1]).toBeGreaterThanOrEqual(wide.top);
	// Points outside the range that is shown are left out.
	const beyond = { ...higher, x: [0, 20, 60] };
	expect(plotOf(present, wide, beyond).tried[0]!.match(/[ML]/g)).toEqual(['M', 'L']);
	expect(plotOf(present, wide, { ...higher, unit: 'A' }).tried).toEqual([]);
});
