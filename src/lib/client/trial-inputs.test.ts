import { expect, test } from 'vitest';
import { defaultOptions, evaluate } from '$lib/calc/evaluate';
import { including, rangeAround, rangeOf, scaled, snapped } from './slider-range';
import { meantBy, readStated } from './stated-value';
import { inputsOf, rangeOfInput } from './trial-inputs';

test('inputs are the lines that state a number and use no other quantity', () => {
	const source = [
		'R1 = tolerance(100 kohm, 1 %) # upper',
		'R2 = preferred(9.8 kohm, E24)',
		'Vin = -3.2 V',
		'n = 3',
		'list = [1, 2]',
		'Vout = Vin * R2 / (R1 + R2)',
		'bad = 2 V + 1 A',
	].join('\n');
	const cells = [{ id: 'c', kind: 'calculation' as const, source }];
	const evaluation = evaluate(cells, { ...defaultOptions, detail: ['R1'] });
	const inputs = inputsOf(cells, evaluation);
	expect(inputs.map(({ name, value, unit }) => [name, value, unit])).toEqual([
		['R1', 100, 'kohm'],
		['R2', 10_000, 'ohm'],
		['Vin', -3.2, 'V'],
		['n', 3, ''],
	]);
	const { lower, upper } = evaluation.quantities.R1!.worstCase!;
	const range = rangeOfInput(inputs[0]!, { R1: { lower, upper } }, evaluation);
	expect([range.lower, range.upper]).toEqual([expect.closeTo(99), expect.closeTo(101)]);
	const plain = rangeOfInput(inputs[2]!, {}, evaluation);
	expect([plain.lower, plain.upper]).toEqual([expect.closeTo(-4.8), expect.closeTo(-1.6)]);
});

test('what is typed is a value within the formula, or a formula', () => {
	const present = readStated('tolerance(100 kohm, 1 %)');
	expect(meantBy('101', present)).toBe('tolerance(101 kohm, 1 %)');
	expect(meantBy(' 99.5 kΩ ', present)).toBe('tolerance(99.5 kΩ, 1 %)');
	expect(meantBy('normal(101 kohm, 20 ohm)', present)).toBe('normal(101 kohm, 20 ohm)');
	expect(meantBy('2 * 47 kohm', present)).toBe('2 * 47 kohm');
	expect(meantBy('5', readStated('25 degC'))).toBe('5 degC');
	expect(meantBy('5', undefined)).toBe('5');
	for (const formula of ['R1', 'preferred(4 kohm, E24)', '1:3', '', 'tolerance(R1, 1 %)']) {
		expect(readStated(formula), formula).toBeUndefined();
	}
});

test('a slider has short values, and widens', () => {
	const range = rangeOf(99, 101);
	expect(range.step).toBeCloseTo(0.01);
	expect(snapped(range, 100.0049)).toBe(100);
	expect(snapped(range, 98)).toBe(99);
	expect(scaled(range, 2)).toMatchObject({ lower: 98, upper: 102 });
	expect(including(range, 105)).toMatchObject({ lower: 99, upper: 105 });
	expect(including(range, 100)).toBe(range);
	expect(rangeAround(0)).toMatchObject({ lower: -1, upper: 1 });
	expect(rangeOf(2, 2)).toMatchObject({ lower: 1, upper: 3 });
});
