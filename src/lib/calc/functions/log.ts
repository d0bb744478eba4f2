import { expectPure, Refusal, scalar, type CalcFunction } from './function';
import { pure } from '../types';
import { map } from '../values';
import { mapNodes, nodesOf } from '../traced';

export const log: CalcFunction = {
	name: 'log',
	signature: 'log(x[, base])',
	help: 'Natural logarithm, or that to a base.',
	examples: [
		{ source: 'log(10)', result: '2.302 59' },
		{ source: 'log(8, 2)', result: '3' },
	],
	count: [1, 2],
	type: ([x, base]) => {
		if (x) expectPure(x, 'The value of `log`');
		if (base) expectPure(base, 'The base of `log`');
		return pure;
	},
	compute: ([x = 0, base]) => {
		const divisor = base === undefined ? 1 : Math.log(scalar(base, 'The base'));
		return map(x, (number) => {
			if (!(number > 0) || !(divisor !== 0))
				throw new Refusal('A logarithm exists for values above zero only.');
			return Math.log(number) / divisor;
		});
	},
	trace: (tape, [x, base]) =>
		mapNodes(tape, x!, (node) => {
			const natural = tape.unary('log', node);
			if (!base) return natural;
			return tape.binary('div', natural, tape.unary('log', nodesOf(tape, base)[0]!));
		}),
};
