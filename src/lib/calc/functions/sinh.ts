import { ofNumber } from './function';

export const sinh = ofNumber(
	{
		name: 'sinh',
		signature: 'sinh(x)',
		help: 'Hyperbolic sine.',
		examples: [{ source: 'sinh(1)', result: '1.1752' }],
	},
	Math.sinh,
);
