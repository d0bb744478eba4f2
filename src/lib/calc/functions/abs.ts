import { expectNumber, refusePoint, type CalcFunction } from './function';
import { pure } from '../types';
import { map } from '../values';
import { mapNodes } from '../traced';

export const abs: CalcFunction = {
	name: 'abs',
	signature: 'abs(x)',
	help: 'The size of a value, without its sign.',
	examples: [{ source: 'abs(-3 mV)', result: '3 mV' }],
	count: [1, 1],
	type: ([x]) => {
		if (!x) return pure;
		expectNumber(x, 'Takes the size of');
		refusePoint(x, 'Takes the size of');
		return x.type;
	},
	compute: ([x = 0]) => map(x, Math.abs),
	trace: (tape, [x]) => mapNodes(tape, x!, (node) => tape.unary('abs', node)),
};
