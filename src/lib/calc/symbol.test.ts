import { describe, expect, test } from 'vitest';
import { typeset } from './symbol';

describe('typesetting a name', () => {
	test.each([
		['V_ref', 'V', 'ref'],
		['Vref', 'V', 'ref'],
		['R1', 'R', '1'],
		['R2exact', 'R', '2exact'],
		['delta_gain', 'δ', 'gain'],
		['theta1', 'θ', '1'],
		['δ_gain', 'δ', 'gain'],
		['Ω', 'Ω', ''],
		['gainError', 'gainError', ''],
		['Power', 'Power', ''],
		['Top', 'Top', ''],
		['k', 'k', ''],
		['V_step_batt', 'V', 'step,batt'],
		['_x', '_x', ''],
		['x_', 'x_', ''],
	])('%s shows %s with subscript %j', (name, glyph, sub) => {
		expect(typeset(name)).toMatchObject({ glyph, sub });
	});

	test('the offsets put the name together again', () => {
		const name = 'delta_gain';
		const { baseTo, subFrom } = typeset(name);
		expect([name.slice(0, baseTo), name.slice(baseTo, subFrom), name.slice(subFrom)]).toEqual([
			'delta',
			'_',
			'gain',
		]);
	});
});
