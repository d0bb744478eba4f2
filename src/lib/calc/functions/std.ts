import { expectSame, type CalcFunction } from './function';
import { ofDimension } from '../types';
import { gathered } from './gathered';
import { sampleDeviation } from './sample-variance';
import { allNodes, varianceOf } from './traced-lists';

export const std: CalcFunction = {
	name: 'std',
	signature: 'std(a, b, …)',
	help: 'Standard deviation of a sample (divisor n − 1).',
	examples: [{ source: 'std(1 V, 2 V, 3 V)', result: '1 V' }],
	count: [1, Infinity],
	type: (args) => {
		const type = expectSame(args, 'Takes the spread of');
		return type.point && type.dimension ? ofDimension(type.dimension) : type;
	},
	compute: (args) => sampleDeviation(gathered(args)),
	trace: (tape, args) => ({
		node: tape.unary('sqrt', varianceOf(tape, allNodes(tape, args))),
	}),
};
