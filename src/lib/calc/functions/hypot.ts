import { expectSame, refusePoint, type CalcFunction } from './function';
import { members } from '../values';
import { folded } from './traced-lists';

export const hypot: CalcFunction = {
	name: 'hypot',
	signature: 'hypot(a, b, …)',
	help: 'Root of the sum of squares.',
	examples: [{ source: 'hypot(3 mV, 4 mV)', result: '5 mV' }],
	count: [1, Infinity],
	type: (args) => {
		const type = expectSame(args, 'Squares and adds');
		if (args[0]) refusePoint({ ...args[0], type }, 'Squares and adds');
		return type;
	},
	compute: (args) => Math.hypot(...args.map((value) => Math.hypot(...members(value)))),
	trace: (tape, args) => folded(tape, args, 'hypot'),
};
