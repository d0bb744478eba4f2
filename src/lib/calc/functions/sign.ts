import { expectNumber, refusePoint, type CalcFunction } from './function';
import { mapNodes } from '../traced';
import { pure } from '../types';
import { map } from '../values';

export const sign: CalcFunction = {
	name: 'sign',
	signature: 'sign(x)',
	help: '1 for a value above zero, −1 below, 0 at zero.',
	examples: [{ source: 'sign(-3 mV)', result: '−1' }],
	count: [1, 1],
	type: ([x]) => {
		if (x) expectNumber(x, 'Takes the sign of');
		if (x) refusePoint(x, 'Takes the sign of');
		return pure;
	},
	compute: ([x = 0]) => map(x, Math.sign),
	trace: (tape, [x]) => mapNodes(tape, x!, (node) => tape.unary('sign', node)),
};
