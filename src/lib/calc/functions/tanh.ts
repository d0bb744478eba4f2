import { ofNumber } from './function';

export const tanh = ofNumber(
	{
		name: 'tanh',
		signature: 'tanh(x)',
		help: 'Hyperbolic tangent.',
		examples: [{ source: 'tanh(0.5)', result: '0.462 117' }],
	},
	Math.tanh,
);
