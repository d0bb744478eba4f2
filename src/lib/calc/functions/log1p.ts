import { ofNumber } from './function';

export const log1p = ofNumber(
	{
		name: 'log1p',
		signature: 'log1p(x)',
		help: 'Natural logarithm of 1 + x; keeps its digits for a small x.',
		examples: [{ source: 'log1p(0.01)', result: '0.009 950 33' }],
	},
	Math.log1p,
	{ holds: (x) => x > -1, message: 'The logarithm of 1 + x exists for x above −1 only.' },
);
