import { ofNumber } from './function';

export const atanh = ofNumber(
	{
		name: 'atanh',
		signature: 'atanh(x)',
		help: 'Value whose hyperbolic tangent is x.',
		examples: [{ source: 'atanh(0.5)', result: '0.549 306' }],
	},
	Math.atanh,
	{ holds: (x) => Math.abs(x) < 1, message: 'A hyperbolic tangent lies between −1 and 1.' },
	(x) => 1 / (1 - x * x),
);
