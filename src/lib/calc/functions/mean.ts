import * as readings from '../curves/univariate';
import { answered } from './answered';
import { expectSame, type CalcFunction } from './function';
import { gathered } from './gathered';
import { allNodes, meanOf } from './traced-lists';

export const mean: CalcFunction = {
	name: 'mean',
	signature: 'mean(a, b, …)',
	help: 'The arithmetic mean.',
	examples: [{ source: 'mean(1 V, 2 V, 6 V)', result: '3 V' }],
	count: [1, Infinity],
	type: (args) => expectSame(args, 'Averages'),
	compute: (args) => answered(readings.mean(Array.from(gathered(args)))),
	trace: (tape, args) => ({ node: meanOf(tape, allNodes(tape, args)) }),
};
