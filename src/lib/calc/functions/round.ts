import type { CalcFunction } from './function';
import { rounded, roundedNodes, roundingType } from './rounding';

export const round: CalcFunction = {
	name: 'round',
	signature: 'round(x[, n[, unit]])',
	help: 'Rounds to whole numbers, to n decimals, or to n decimals of a unit.',
	examples: [
		{ source: 'round(3.14159, 2)', result: '3.14' },
		{ source: 'round(2.41124 V, 1, mV)', result: '2.4112 V' },
	],
	count: [1, 3],
	unitAt: 2,
	type: roundingType,
	compute: (args) => rounded(args, (x) => Math.sign(x) * Math.round(Math.abs(x))),
	trace: (tape, args) => roundedNodes(tape, args, (node) => tape.unary('round', node)),
};
