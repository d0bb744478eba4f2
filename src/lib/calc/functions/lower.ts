import { pure } from '../types';
import { expectNumber, type CalcFunction } from './function';

export const lower: CalcFunction = {
	name: 'lower',
	signature: 'lower(x)',
	help: 'The lowest value of a quantity while its inputs stay in their intervals; a normal input counts with ± 3 u.',
	examples: [{ source: 'lower(tolerance(100 ohm, 1 %))', result: '99 Ω' }],
	count: [1, 1],
	type: ([x]) => {
		if (!x) return pure;
		expectNumber(x, 'Takes the lowest value of');
		return x.type;
	},
	compute: ([x = 0]) => x,
	reads: 'lower',
};
