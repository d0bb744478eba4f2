import { ofNumber } from './function';

export const asinh = ofNumber(
	{
		name: 'asinh',
		signature: 'asinh(x)',
		help: 'Value whose hyperbolic sine is x.',
		examples: [{ source: 'asinh(1)', result: '0.881 374' }],
	},
	Math.asinh,
	undefined,
	(x) => 1 / Math.hypot(x, 1),
);
