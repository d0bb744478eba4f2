import { expectNumber, refusePoint, type CalcFunction } from './function';
import { isPure, ofDimension, pure, unknown } from '../types';
import { raised } from '../units/dimension';
import { map } from '../values';
import { mapNodes } from '../traced';

export const cube: CalcFunction = {
	name: 'cube',
	signature: 'cube(x)',
	help: 'The third power.',
	examples: [{ source: 'cube(2)', result: '8' }],
	count: [1, 1],
	type: ([x]) => {
		if (!x) return pure;
		expectNumber(x, 'Cubes');
		refusePoint(x, 'Cubes');
		if (!x.type.dimension) return unknown;
		return isPure(x.type) ? pure : ofDimension(raised(x.type.dimension, 3));
	},
	compute: ([x = 0]) => map(x, (number) => number ** 3),
	trace: (tape, [x]) => mapNodes(tape, x!, (node) => tape.binary('pow', node, tape.constant(3))),
};
