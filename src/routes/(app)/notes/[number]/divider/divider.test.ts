import { describe, expect, test } from 'vitest';
import { evaluate, defaultOptions } from '$lib/calc/evaluate';
import { findDividers } from '$lib/calc/tables/divider-search';
import { isRefusal } from '$lib/calc/tables/refusal';
import { amountOf, shareOf, shown, typed } from './amounts';
import { dividerLines } from './divider-lines';
import { noWishes, questionOf } from './question';
import { signedPercent } from './signed-percent';

describe('amounts', () => {
	test.each([
		['32 V', 'V', 32],
		['32', 'V', 32],
		['2.4V', 'V', 2.4],
		['38.3 kohm', 'ohm', 38300],
		['1 MΩ', 'ohm', 1e6],
		['470k', 'ohm', 470e3],
		['100 µA', 'A', 100e-6],
		['1e3 V', 'V', 1000],
	] as const)('%s is read', (text, unit, value) => {
		expect(amountOf(text, unit)).toBe(value);
	});

	test.each(['', 'V', '3 A', '-3 V', '3,5 V', '3 V 4'])('%j is no voltage', (text) => {
		expect(amountOf(text, 'V')).toBeUndefined();
	});

	test('a share is a percentage', () => {
		expect(shareOf('0.5 %')).toBe(0.005);
		expect(shareOf('2')).toBe(0.02);
		expect(shareOf('two')).toBeUndefined();
	});

	test('amounts are shown with a prefix, and typed as a formula takes them', () => {
		expect(shown(38300, 'ohm')).toBe('38.3\u00a0kΩ');
		expect(shown(0.0000695, 'A', 3)).toBe('69.5\u00a0µA');
		expect(shown(999.96, 'ohm', 3)).toBe('1\u00a0kΩ');
		expect(typed(38300, 'ohm')).toBe('38.3 kohm');
		expect(typed(0.25, 'V')).toBe('250 mV');
		expect(signedPercent(-0.0005)).toBe('\u22120.050\u00a0%');
		expect(signedPercent(1e-17)).toBe('0\u00a0%');
	});
});

describe('the question', () => {
	test('empty fields ask for nothing, others are limits', () => {
		expect(
			questionOf({ ...noWishes, input: '32 V', output: '2.4 V', currentTo: '100 uA' }),
		).toEqual({
			question: {
				inputVoltage: 32,
				outputVoltage: 2.4,
				series: 'E96',
				doubled: false,
				error: 0.01,
				current: { atMost: 100e-6 },
			},
		});
	});

	test('what cannot be read is named with an example', () => {
		const read = questionOf({ ...noWishes, output: 'two', load: '0' });
		expect(read).toEqual({
			faults: {
				input: 'Type it as in 32 V.',
				output: 'Type it as in 2.4 V.',
				load: 'Type it as in 1 Mohm.',
			},
		});
	});
});

describe('the lines', () => {
	const question = { inputVoltage: 32, outputVoltage: 2.4, series: 'E24', load: 1e6 };
	const written = (doubled: boolean, taken: string[]) => {
		const found = findDividers({ ...question, doubled });
		if (isRefusal(found)) throw new Error(found.message);
		const wanted = found.find(({ parts }) => parts === (doubled ? 3 : 2));
		if (!wanted) throw new Error('no such divider');
		return { wanted, source: dividerLines(wanted, question, '1 %', new Set(taken)) };
	};

	test.each([false, true])(
		'they compute what the search found (one arm doubled: %s)',
		(doubled) => {
			const { wanted, source } = written(doubled, []);
			const { quantities, errors } = evaluate(
				[{ id: 'c', kind: 'calculation', source }],
				defaultOptions,
			);
			expect(errors).toEqual([]);
			expect(quantities.V_out?.value).toBeCloseTo(wanted.outputVoltage, 9);
			expect(quantities.V_out?.standardUncertainty).toBeGreaterThan(0);
		},
	);

	test('names that the note has already are left alone', () => {
		const { source } = written(false, ['R_1', 'R2', 'V_in']);
		const names = source.split('\n').map((line) => line.split(' = ')[0]);
		expect(names).toEqual(['V_in_2', 'R_3', 'R_4', 'R_load', 'V_out', 'k_div']);
	});
});
