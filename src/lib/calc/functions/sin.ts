import { ofNumber } from './function';

export const sin = ofNumber(
	{
		name: 'sin',
		signature: 'sin(x)',
		help: 'Sine of an angle in radians, or in the unit that is given.',
		examples: [{ source: 'sin(30 deg)', result: '0.5' }],
	},
	Math.sin,
);
