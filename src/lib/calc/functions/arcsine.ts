import { arcsine as distribution } from '../doubt/distributions/arcsine';
import { stated } from './stated';

export const arcsine = stated(
	{
		name: 'arcsine',
		signature: 'arcsine(x, a)',
		help: 'A value that swings like a sine within ±a, likelier near the ends (U-shaped); a may be relative.',
		examples: [{ source: 'arcsine(10 V, 1 V)', result: '10.0 V ± 1.4 V' }],
		source: 'JCGM 101:2008, 6.4.6',
	},
	[2, 2],
	[1],
	([a = 0]) => distribution(a),
);
