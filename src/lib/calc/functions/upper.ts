import { pure } from '../types';
import { expectNumber, type CalcFunction } from './function';

export const upper: CalcFunction = {
	name: 'upper',
	signature: 'upper(x)',
	help: 'The highest value of a quantity while its inputs stay in their intervals; a normal input counts with ± 3 u.',
	examples: [{ source: 'upper(tolerance(100 ohm, 1 %))', result: '101 Ω' }],
	count: [1, 1],
	type: ([x]) => {
		if (!x) return pure;
		expectNumber(x, 'Takes the highest value of');
		return x.type;
	},
	compute: ([x = 0]) => x,
	reads: 'upper',
};
