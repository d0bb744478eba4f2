import { ofNumber } from './function';

export const acos = ofNumber(
	{
		name: 'acos',
		signature: 'acos(x)',
		help: 'Angle whose cosine is x, in radians.',
		examples: [{ source: 'acos(0.5) to deg', result: '60 °' }],
	},
	Math.acos,
	{ holds: (x) => Math.abs(x) <= 1, message: 'A cosine lies between −1 and 1.' },
);
