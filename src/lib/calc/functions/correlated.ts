import { truth } from '../types';
import { expectPure, type CalcFunction } from './function';

export const correlated: CalcFunction = {
	name: 'correlated',
	signature: 'correlated(x, y, r)',
	help: 'States that two inputs are correlated, with coefficient r from −1 to 1. It stands on a line of its own.',
	examples: [
		{
			source:
				'R1 = tolerance(1 kohm, 1 %)\nR2 = tolerance(1 kohm, 1 %)\ncorrelated(R1, R2, 1)\nR1 - R2',
			result: '0 Ω',
		},
	],
	source: 'JCGM 100:2008, 5.2.2',
	count: [3, 3],
	type: ([, , r]) => {
		if (r) expectPure(r, 'The correlation coefficient');
		return truth;
	},
	compute: () => true,
};
