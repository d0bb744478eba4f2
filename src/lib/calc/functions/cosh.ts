import { ofNumber } from './function';

export const cosh = ofNumber(
	{
		name: 'cosh',
		signature: 'cosh(x)',
		help: 'Hyperbolic cosine.',
		examples: [{ source: 'cosh(1)', result: '1.543 08' }],
	},
	Math.cosh,
);
