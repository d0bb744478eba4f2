import { ofNumber } from './function';

export const log10 = ofNumber(
	{
		name: 'log10',
		signature: 'log10(x)',
		help: 'Logarithm to the base 10.',
		examples: [
			{ source: 'log10(1000)', result: '3' },
			{ source: '20 * log10(0.5)', result: '−6.0206' },
		],
	},
	Math.log10,
	{ holds: (x) => x > 0, message: 'A logarithm exists for values above zero only.' },
);
