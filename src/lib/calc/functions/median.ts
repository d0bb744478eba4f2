import { expectSame, type CalcFunction } from './function';
import { gathered } from './gathered';

export const median: CalcFunction = {
	name: 'median',
	signature: 'median(a, b, …)',
	help: 'The value in the middle, or the mean of the two there.',
	examples: [{ source: 'median(1, 9, 2)', result: '2' }],
	count: [1, Infinity],
	type: (args) => expectSame(args, 'Orders'),
	compute: (args) => {
		const all = gathered(args).sort();
		const middle = all.length >> 1;
		const upper = all[middle] ?? NaN;
		return all.length % 2 === 1 ? upper : ((all[middle - 1] ?? NaN) + upper) / 2;
	},
};
