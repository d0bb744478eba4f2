import { ofNumber } from './function';

export const exp = ofNumber(
	{
		name: 'exp',
		signature: 'exp(x)',
		help: 'e to the power of x.',
		examples: [{ source: 'exp(1)', result: '2.718 28' }],
	},
	Math.exp,
);
