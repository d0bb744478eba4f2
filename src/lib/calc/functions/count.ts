import { expectNumber, type CalcFunction } from './function';
import { pure } from '../types';
import { gathered } from './gathered';

export const count: CalcFunction = {
	name: 'count',
	signature: 'count(a, b, …)',
	help: 'How many values there are.',
	examples: [{ source: 'count([4, 5, 6])', result: '3' }],
	count: [1, Infinity],
	ofEstimate: true,
	type: (args) => {
		for (const argument of args) expectNumber(argument, 'Counts');
		return pure;
	},
	compute: (args) => gathered(args).length,
};
