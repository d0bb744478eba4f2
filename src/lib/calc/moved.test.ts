import { expect, test } from 'vitest';
import { defaultOptions, evaluate } from './evaluate';
import { movedBetween } from './moved';

const note = (source: string, requirement = 'Vout <= 3 V') =>
	evaluate(
		[
			{ id: 'c', kind: 'calculation', source },
			{ id: 'r', kind: 'requirement', source: requirement },
			{ id: 't', kind: 'text', source: '{{Vout}} and {{Vin}}' },
		],
		defaultOptions,
	);
const plain = (text: string | null | undefined) => text?.replaceAll(/[\u00a0\u202f]/g, ' ');

test('what an input moves is listed with its difference and share, and nothing else', () => {
	const lines = 'R1 = 30 kohm\nR2 = 10 kohm\nVin = 10 V\nVout = Vin * R2 / (R1 + R2)';
	const moved = movedBetween(note(lines), note(lines.replace('30 kohm', '15 kohm')));
	expect(
		moved.quantities.map(({ name, before, after, difference, share }) => [
			name,
			plain(before?.text),
			plain(after?.text),
			plain(difference),
			share?.toFixed(3),
		]),
	).toEqual([
		['R1', '30 kΩ', '15 kΩ', '−15 kΩ', '-0.500'],
		['Vout', '2.5 V', '4 V', '+1.5 V', '0.600'],
	]);
	expect(moved.requirements).toMatchObject([
		{ cell: 'r', line: 1, before: { verdict: 'met' }, after: { verdict: 'not met' } },
	]);
	expect(moved.figures.map(({ from, readout }) => [from, plain(readout?.text)])).toEqual([
		[0, '4 V'],
	]);
	expect(movedBetween(note(lines), note(lines))).toEqual({
		quantities: [],
		requirements: [],
		figures: [],
		faults: [],
		sweeps: [],
	});
});

test('a doubt that moves alone, another unit, another dimension and an error are told apart', () => {
	const lines = 'R1 = tolerance(1 kohm, 1 %)\nVin = 25 degC\nVout = 2 V';
	const to = (from: string, next: string) =>
		movedBetween(note(lines), note(lines.replace(from, next)));
	const [wider] = to('1 %', '5 %').quantities;
	expect(wider).toMatchObject({ name: 'R1', difference: null, share: null });
	expect(wider?.after?.doubt).not.toBe(wider?.before?.doubt);
	const [warmer] = to('25 degC', '300 K').quantities;
	expect([plain(warmer?.difference), warmer?.share]).toEqual(['+1.85 K', null]);
	expect(to('2 V', '2 A').quantities).toMatchObject([{ difference: null, share: null }]);
	const broken = to('2 V', '2 V +');
	expect(broken.quantities).toMatchObject([{ name: 'Vout', after: null }]);
	expect(broken.requirements).toMatchObject([{ after: null }]);
	expect(broken.faults.map(({ code }) => code)).toContain('syntax');
});

test('a curve that is another one is given whole; one that stays is not', () => {
	const curves = (r2: string) =>
		evaluate(
			[
				{
					id: 'c',
					kind: 'calculation',
					source: `R2 = ${r2}\nVin = 10 V\nVout = Vin * R2 / 40 kohm`,
				},
				{ id: 'd', kind: 'calculation', source: 'Vdouble = 2 * Vin' },
				{ id: 'moves', kind: 'curve', source: 'Vout over Vin from 0 V to 20 V in 3 points' },
				{ id: 'stays', kind: 'curve', source: 'Vdouble over Vin from 0 V to 20 V in 3 points' },
			],
			defaultOptions,
		);
	const { sweeps } = movedBetween(curves('10 kohm'), curves('20 kohm'));
	expect(sweeps.map(({ cell, series }) => [cell, series[0]?.values])).toEqual([
		['moves', [0, 5, 10]],
	]);
	expect(movedBetween(curves('10 kohm'), curves('20 kohm +')).sweeps).toEqual([]);
});
