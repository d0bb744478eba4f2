import { expectSame, type CalcFunction } from './function';
import { ofDimension, unknown } from '../types';
import { raised } from '../units/dimension';
import { gathered } from './gathered';
import { sampleVariance } from './sample-variance';
import { allNodes, varianceOf } from './traced-lists';

export const variance: CalcFunction = {
	name: 'variance',
	signature: 'variance(a, b, …)',
	help: 'Variance of a sample (divisor n − 1).',
	examples: [{ source: 'variance(1, 2, 3, 4)', result: '1.666 67' }],
	count: [1, Infinity],
	type: (args) => {
		const type = expectSame(args, 'Takes the spread of');
		return type.dimension ? ofDimension(raised(type.dimension, 2)) : unknown;
	},
	compute: (args) => sampleVariance(gathered(args)),
	trace: (tape, args) => ({ node: varianceOf(tape, allNodes(tape, args)) }),
};
