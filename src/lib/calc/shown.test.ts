import { expect, test } from 'vitest';
import { Calculator } from './calculator';
import { defaultOptions, evaluate } from './evaluate';
import type { Display, Evaluation } from './results';

const cells = [
	{
		id: 'c',
		kind: 'calculation' as const,
		source:
			'Vin = 2.5 V\nR = tolerance(100 kohm, 1 %)\ntemp = 25 degC\nIin = Vin / R\nn = 3\nlist = [1 V, 2 V]',
	},
	{ id: 't', kind: 'text' as const, source: 'about {{Vin}}, {{Vin: uV}} and {{Iin}}' },
];
const shown = (choices: Record<string, Display>) =>
	evaluate(cells, { ...defaultOptions, shown: choices });
const texts = ({ quantities }: Evaluation, ...names: string[]) =>
	names.map((name) => quantities[name]?.text.replaceAll(/[\u00a0\u202f]/g, ' '));

test('a quantity is shown in the unit and with the digits that were chosen, wherever it stands', () => {
	const results = shown({
		Vin: { unit: 'mV' },
		R: { digits: 2 },
		temp: { unit: 'K', digits: 5 },
		n: { digits: 3 },
	});
	expect(texts(results, 'Vin', 'R', 'temp', 'n')).toEqual([
		'2500 mV',
		'100 kΩ ± 1 kΩ',
		'298.15 K',
		'3.00',
	]);
	expect(results.lines[0]?.readout).toEqual(results.quantities.Vin?.readout);
	expect(results.figures.map(({ readout }) => readout?.unit)).toEqual(['mV', 'µV', 'µA']);
	expect(results.quantities.Vin).toMatchObject({ value: 2.5, unit: 'V' });
});

test('digits of a value in doubt take its doubt to the same place, and leave it one digit at least', () => {
	const of = (digits: number) => texts(shown({ R: { digits } }), 'R')[0];
	expect([1, 3, 4, 5, 6].map(of)).toEqual([
		'100 kΩ ± 1 kΩ',
		'100 kΩ ± 1 kΩ',
		'100.0 kΩ ± 1.1 kΩ',
		'100.00 kΩ ± 1.13 kΩ',
		'100.000 kΩ ± 1.132 kΩ',
	]);
});

test('a unit that does not fit or cannot be read leaves the readout as usual', () => {
	const usual = evaluate(cells, defaultOptions);
	const odd = {
		Vin: { unit: 'A' },
		R: { unit: '!' },
		temp: { unit: 'A' },
		constructor: { digits: 2 },
	};
	expect(shown(odd)).toEqual(usual);
	expect(texts(shown({ list: { unit: 'mV' } }), 'list')).toEqual(['[1000, 2000] mV']);
});

test('another choice changes the readouts of a note that was computed before', () => {
	const calculator = new Calculator();
	const as = (choices: Record<string, Display>) =>
		calculator.evaluate(cells, { ...defaultOptions, shown: choices });
	expect(texts(as({ Vin: { unit: 'mV' } }), 'Vin')).toEqual(['2500 mV']);
	expect(texts(as({ Vin: { digits: 4 } }), 'Vin')).toEqual(['2.500 V']);
	expect(as({})).toEqual(evaluate(cells, defaultOptions));
});

const judged = [
	{
		id: 'c',
		kind: 'calculation' as const,
		source: 'Vin = tolerance(2.5 V, 1 %)\nI = Vin / (10 kohm)',
	},
	{ id: 'r', kind: 'requirement' as const, source: 'Vin <= 3 V\n2 V <= Vin\nVin / 2 <= 2 V' },
];

test('what is said of a quantity stands in its chosen unit too: limits, budgets, intervals', () => {
	const calculator = new Calculator();
	const as = (choices: Record<string, Display>) =>
		calculator.evaluate(judged, {
			...defaultOptions,
			detail: 'all',
			monteCarlo: { quantities: ['I'], trials: 1000, seed: 1 },
			shown: choices,
		});
	const plain = (text: string | null | undefined) => text?.replaceAll(/[\u00a0\u202f]/g, ' ');
	const usual = as({});
	const { requirements, quantities } = as({ Vin: { unit: 'mV', digits: 3 }, I: { unit: 'mA' } });
	const [most, least, half] = requirements;
	// 25 mV to either side, rectangular (JCGM 100:2008, 4.3.7): u = 25 mV / sqrt(3), U = 1.96 u = 28.3 mV, at the third digit of 2500 mV.
	expect(plain(most?.valueText)).toBe('2500 mV ± 30 mV');
	expect(plain(most?.upperText)).toBe('3000 mV');
	expect(plain(least?.lowerText)).toBe('2000 mV');
	// A formula is no quantity that somebody chose for, and the numbers stay in the unit that is named beside them.
	expect(half).toEqual(usual.requirements[2]);
	expect(most).toMatchObject({ value: 2.5, unit: 'V', upper: 3 });
	expect(plain(quantities.I?.worstCase?.text)).toMatch(/ mA to .* mA$/);
	expect(plain(quantities.I?.budget?.[0]?.texts.contribution)).toMatch(/ mA$/);
	expect(plain(quantities.I?.budget?.[0]?.texts.value)).toBe('2500 mV');
	expect(plain(quantities.I?.monteCarlo?.texts.symmetric)).toMatch(/ mA to .* mA$/);
	expect(as({})).toEqual(usual);
});
