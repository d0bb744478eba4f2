import { ofNumber } from './function';

export const expm1 = ofNumber(
	{
		name: 'expm1',
		signature: 'expm1(x)',
		help: 'e to the power of x, less one; keeps its digits for a small x.',
		examples: [{ source: 'expm1(1e-6)', result: '1 × 10⁻⁶' }],
	},
	Math.expm1,
);
