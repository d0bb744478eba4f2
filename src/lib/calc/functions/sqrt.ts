import { expectNumber, Refusal, refusePoint, type CalcFunction } from './function';
import { isPure, ofDimension, pure, unknown } from '../types';
import { raised } from '../units/dimension';
import { map } from '../values';
import { mapNodes } from '../traced';

export const sqrt: CalcFunction = {
	name: 'sqrt',
	signature: 'sqrt(x)',
	help: 'Square root; the unit takes the root too.',
	examples: [
		{ source: 'sqrt(2)', result: '1.414 21' },
		{ source: 'sqrt(9 V^2)', result: '3 V' },
	],
	count: [1, 1],
	type: ([x]) => {
		if (!x) return pure;
		expectNumber(x, 'Takes the root of');
		refusePoint(x, 'Takes the root of');
		if (!x.type.dimension) return unknown;
		return isPure(x.type) ? pure : ofDimension(raised(x.type.dimension, 1 / 2));
	},
	compute: ([x = 0]) =>
		map(x, (number) => {
			if (number < 0)
				throw new Refusal('The square root of a negative value is not a real number.');
			return Math.sqrt(number);
		}),
	trace: (tape, [x]) => mapNodes(tape, x!, (node) => tape.unary('sqrt', node)),
};
