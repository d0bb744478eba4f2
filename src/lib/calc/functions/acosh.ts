import { ofNumber } from './function';

export const acosh = ofNumber(
	{
		name: 'acosh',
		signature: 'acosh(x)',
		help: 'Value whose hyperbolic cosine is x.',
		examples: [{ source: 'acosh(2)', result: '1.316 96' }],
	},
	Math.acosh,
	{ holds: (x) => x >= 1, message: 'A hyperbolic cosine is 1 or more.' },
	(x) => 1 / Math.sqrt(x * x - 1),
);
