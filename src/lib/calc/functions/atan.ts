import { ofNumber } from './function';

export const atan = ofNumber(
	{
		name: 'atan',
		signature: 'atan(x)',
		help: 'Angle whose tangent is x, in radians.',
		examples: [{ source: 'atan(1) to deg', result: '45 °' }],
	},
	Math.atan,
);
