import type { CalcFunction } from './function';
import { rounded, roundedNodes, roundingType } from './rounding';

export const floor: CalcFunction = {
	name: 'floor',
	signature: 'floor(x[, n[, unit]])',
	help: 'Rounds down to whole numbers, to n decimals, or to n decimals of a unit.',
	examples: [
		{ source: 'floor(3.9)', result: '3' },
		{ source: 'floor(2.41124 V, 0, mV)', result: '2.411 V' },
	],
	count: [1, 3],
	unitAt: 2,
	type: roundingType,
	compute: (args) => rounded(args, Math.floor),
	trace: (tape, args) => roundedNodes(tape, args, (node) => tape.unary('floor', node)),
};
