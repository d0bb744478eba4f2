import { describe, expect, it } from 'vitest';
import type { Row } from '$lib/proof/proof';
import { computedText, differenceText, printed, unitText } from './figure-text';

function row(about: Partial<Row>): Row {
	return {
		what: 'x',
		unit: '1',
		published: '0.07',
		computed: 0.0711,
		rule: '',
		agrees: true,
		confirmed: '',
		...about,
	};
}

describe('A figure of the proofs', () => {
	it.each([
		['-0.930', '−0.930'],
		['7.748091729e-5', '7.748091729 × 10⁻⁵'],
		['0.165289256198347E-01', '0.165289256198347 × 10⁻¹'],
		['4K7', '4K7'],
		['yellow violet red gold', 'yellow violet red gold'],
		['not met', 'not met'],
	])('%s is set as %s', (figure, text) => {
		expect(printed(figure)).toBe(text);
	});

	it.each([
		['0.071', 0.071071407397, '0.0710714'],
		[null, 8.33333333333333, '8.33333333333'],
		['5', 5, '5'],
		['met', 'met', 'met'],
		['0.673565789473684E-03', 0.000673565789473684, '0.000673565789473684'],
	])('beside the printed %s, %s is shown as %s', (published, computed, text) => {
		expect(computedText(row({ published, computed }))).toBe(text);
	});

	it('is off by so much', () => {
		expect(differenceText(row({ difference: -0.000_071_4 }))).toBe('−0.000071');
		expect(differenceText(row({ difference: 0 }))).toBe('0');
		expect(differenceText(row({}))).toBe('');
	});

	it.each([
		['1', ''],
		['kohm', 'kΩ'],
		['degC', '°C'],
		['us', 'µs'],
		['mm2/s', 'mm²/s'],
		['N/A^2', 'N/A²'],
	])('has its unit %s as %s', (unit, text) => {
		expect(unitText(unit)).toBe(text);
	});
});
