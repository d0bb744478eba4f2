import { ofNumber } from './function';

export const tan = ofNumber(
	{
		name: 'tan',
		signature: 'tan(x)',
		help: 'Tangent of an angle in radians, or in the unit that is given.',
		examples: [{ source: 'tan(45 deg)', result: '1' }],
	},
	Math.tan,
);
