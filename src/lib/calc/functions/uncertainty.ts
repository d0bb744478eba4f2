import { pure } from '../types';
import { expectNumber, type CalcFunction } from './function';
import { difference } from './stated';

export const uncertainty: CalcFunction = {
	name: 'uncertainty',
	signature: 'uncertainty(x)',
	help: 'The standard uncertainty of a quantity, to first order.',
	examples: [{ source: 'uncertainty(tolerance(100 ohm, 1 %))', result: '577.35 mΩ' }],
	source: 'JCGM 100:2008, 5.1.2',
	count: [1, 1],
	type: ([x]) => {
		if (!x) return pure;
		expectNumber(x, 'Takes the uncertainty of');
		return difference(x.type);
	},
	compute: () => 0,
	reads: 'uncertainty',
};
