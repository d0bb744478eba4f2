import { ofNumber } from './function';

export const cos = ofNumber(
	{
		name: 'cos',
		signature: 'cos(x)',
		help: 'Cosine of an angle in radians, or in the unit that is given.',
		examples: [{ source: 'cos(60 deg)', result: '0.5' }],
	},
	Math.cos,
);
