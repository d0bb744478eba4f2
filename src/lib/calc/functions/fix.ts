import type { CalcFunction } from './function';
import { rounded, roundedNodes, roundingType } from './rounding';

export const fix: CalcFunction = {
	name: 'fix',
	signature: 'fix(x[, n[, unit]])',
	help: 'Rounds towards zero to whole numbers, to n decimals, or to n decimals of a unit.',
	examples: [{ source: 'fix(-3.9)', result: '−3' }],
	count: [1, 3],
	unitAt: 2,
	type: roundingType,
	compute: (args) => rounded(args, Math.trunc),
	trace: (tape, args) =>
		roundedNodes(tape, args, (node) =>
			tape.binary('mul', tape.unary('sign', node), tape.unary('floor', tape.unary('abs', node))),
		),
};
