import { triangular as distribution } from '../doubt/distributions/triangular';
import { stated } from './stated';

export const triangular = stated(
	{
		name: 'triangular',
		signature: 'triangular(x, a)',
		help: 'A value within ±a, likelier near the middle; a may be relative.',
		examples: [{ source: 'triangular(10 V, 1 V)', result: '10.00 V ± 0.80 V' }],
		source: 'JCGM 100:2008, 4.3.9',
	},
	[2, 2],
	[1],
	([a = 0]) => distribution(a),
);
