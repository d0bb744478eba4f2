import { ofNumber } from './function';

export const asin = ofNumber(
	{
		name: 'asin',
		signature: 'asin(x)',
		help: 'Angle whose sine is x, in radians.',
		examples: [{ source: 'asin(0.5) to deg', result: '30 °' }],
	},
	Math.asin,
	{ holds: (x) => Math.abs(x) <= 1, message: 'A sine lies between −1 and 1.' },
);
