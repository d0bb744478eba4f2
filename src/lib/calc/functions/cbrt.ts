import { expectNumber, refusePoint, type CalcFunction } from './function';
import { isPure, ofDimension, pure, unknown } from '../types';
import { raised } from '../units/dimension';
import { map } from '../values';
import { mapNodes } from '../traced';

export const cbrt: CalcFunction = {
	name: 'cbrt',
	signature: 'cbrt(x)',
	help: 'Cube root; the unit takes the root too.',
	examples: [{ source: 'cbrt(27)', result: '3' }],
	count: [1, 1],
	type: ([x]) => {
		if (!x) return pure;
		expectNumber(x, 'Takes the root of');
		refusePoint(x, 'Takes the root of');
		if (!x.type.dimension) return unknown;
		return isPure(x.type) ? pure : ofDimension(raised(x.type.dimension, 1 / 3));
	},
	compute: ([x = 0]) => map(x, Math.cbrt),
	trace: (tape, [x]) => mapNodes(tape, x!, (node) => tape.unary('cbrt', node)),
};
