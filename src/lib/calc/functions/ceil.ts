import type { CalcFunction } from './function';
import { rounded, roundedNodes, roundingType } from './rounding';

export const ceil: CalcFunction = {
	name: 'ceil',
	signature: 'ceil(x[, n[, unit]])',
	help: 'Rounds up to whole numbers, to n decimals, or to n decimals of a unit.',
	examples: [
		{ source: 'ceil(3.1)', result: '4' },
		{ source: 'ceil(2.41124 V, 0, mV)', result: '2.412 V' },
	],
	count: [1, 3],
	unitAt: 2,
	type: roundingType,
	compute: (args) => rounded(args, Math.ceil),
	trace: (tape, args) => roundedNodes(tape, args, (node) => tape.unary('ceil', node)),
};
