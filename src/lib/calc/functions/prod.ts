import { expectPure, type CalcFunction } from './function';
import { pure } from '../types';
import { gathered } from './gathered';
import { folded } from './traced-lists';

export const prod: CalcFunction = {
	name: 'prod',
	signature: 'prod(a, b, …)',
	help: 'The product of pure numbers.',
	examples: [{ source: 'prod(2, 3, 4)', result: '24' }],
	count: [1, Infinity],
	type: (args) => {
		for (const argument of args) expectPure(argument, 'A value of `prod`');
		return pure;
	},
	compute: (args) => gathered(args).reduce((a, b) => a * b, 1),
	trace: (tape, args) => folded(tape, args, 'mul'),
};
