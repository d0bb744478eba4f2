import { writeValueCode } from '../tables/value-codes';
import { answered } from './answered';
import { scalar, type CalcFunction } from './function';
import { expectUnit } from './in-unit';

export const rkmText: CalcFunction = {
	name: 'rkmText',
	signature: 'rkmText(R)',
	help: 'How a resistor of that value is marked, the letter at the decimal point.',
	examples: [
		{ source: 'rkmText(4.7 kohm)', result: '4K7' },
		{ source: 'rkmText(preferred(28.2 kohm, E24))', result: '27K' },
	],
	source: 'IEC 60062:2016',
	count: [1, 1],
	ofEstimate: true,
	type: ([resistance]) => {
		expectUnit(resistance, 'ohm', 'The resistance');
		return { kind: 'text' };
	},
	compute: ([resistance]) =>
		answered(writeValueCode(scalar(resistance, 'The resistance'), 'resistance'), { value: 'R' }),
};
