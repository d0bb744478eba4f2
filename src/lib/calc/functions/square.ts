import { expectNumber, refusePoint, type CalcFunction } from './function';
import { isPure, ofDimension, pure, unknown } from '../types';
import { raised } from '../units/dimension';
import { map } from '../values';
import { mapNodes } from '../traced';

export const square: CalcFunction = {
	name: 'square',
	signature: 'square(x)',
	help: 'The value times itself.',
	examples: [{ source: 'square(3 V)', result: '9 V²' }],
	count: [1, 1],
	type: ([x]) => {
		if (!x) return pure;
		expectNumber(x, 'Squares');
		refusePoint(x, 'Squares');
		if (!x.type.dimension) return unknown;
		return isPure(x.type) ? pure : ofDimension(raised(x.type.dimension, 2));
	},
	compute: ([x = 0]) => map(x, (number) => number * number),
	trace: (tape, [x]) => mapNodes(tape, x!, (node) => tape.binary('pow', node, tape.constant(2))),
};
