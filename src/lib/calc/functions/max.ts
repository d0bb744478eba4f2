import { expectSame, type CalcFunction } from './function';
import { gathered } from './gathered';
import { folded } from './traced-lists';

export const max: CalcFunction = {
	name: 'max',
	signature: 'max(a, b, …)',
	help: 'The largest value.',
	examples: [
		{ source: 'max(3 V, 200 mV)', result: '3 V' },
		{ source: 'max([2, 5, 3])', result: '5' },
	],
	count: [1, Infinity],
	type: (args) => expectSame(args, 'Compares'),
	compute: (args) => gathered(args).reduce((a, b) => Math.max(a, b)),
	trace: (tape, args) => folded(tape, args, 'max'),
};
