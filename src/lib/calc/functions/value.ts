import { pure } from '../types';
import { expectNumber, type CalcFunction } from './function';

export const value: CalcFunction = {
	name: 'value',
	signature: 'value(x)',
	help: 'The value of a quantity without its uncertainty.',
	examples: [{ source: 'value(normal(2.5 V, 1 mV))', result: '2.5 V' }],
	count: [1, 1],
	type: ([x]) => {
		if (!x) return pure;
		expectNumber(x, 'Takes the value of');
		return x.type;
	},
	compute: ([x = 0]) => x,
	ofEstimate: true,
};
