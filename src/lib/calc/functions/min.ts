import { expectSame, type CalcFunction } from './function';
import { gathered } from './gathered';
import { folded } from './traced-lists';

export const min: CalcFunction = {
	name: 'min',
	signature: 'min(a, b, …)',
	help: 'The smallest value.',
	examples: [{ source: 'min(3 V, 200 mV)', result: '200 mV' }],
	count: [1, Infinity],
	type: (args) => expectSame(args, 'Compares'),
	compute: (args) => gathered(args).reduce((a, b) => Math.min(a, b)),
	trace: (tape, args) => folded(tape, args, 'min'),
};
