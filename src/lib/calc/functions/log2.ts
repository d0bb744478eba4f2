import { ofNumber } from './function';

export const log2 = ofNumber(
	{
		name: 'log2',
		signature: 'log2(x)',
		help: 'Logarithm to the base 2.',
		examples: [{ source: 'log2(4096)', result: '12' }],
	},
	Math.log2,
	{ holds: (x) => x > 0, message: 'A logarithm exists for values above zero only.' },
);
