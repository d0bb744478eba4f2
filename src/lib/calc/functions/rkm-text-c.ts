import { writeValueCode } from '../tables/value-codes';
import { answered } from './answered';
import { scalar, type CalcFunction } from './function';
import { expectUnit } from './in-unit';

export const rkmTextC: CalcFunction = {
	name: 'rkmTextC',
	signature: 'rkmTextC(C)',
	help: 'How a capacitor of that value is marked, the letter at the decimal point.',
	examples: [
		{ source: 'rkmTextC(4.7 pF)', result: '4p7' },
		{ source: 'rkmTextC(100 nF)', result: '100n' },
	],
	source: 'IEC 60062:2016',
	count: [1, 1],
	ofEstimate: true,
	type: ([capacitance]) => {
		expectUnit(capacitance, 'F', 'The capacitance');
		return { kind: 'text' };
	},
	compute: ([capacitance]) =>
		answered(writeValueCode(scalar(capacitance, 'The capacitance'), 'capacitance'), { value: 'C' }),
};
