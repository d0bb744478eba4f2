import { rectangular as distribution } from '../doubt/distributions/rectangular';
import { stated } from './stated';

export const tolerance = stated(
	{
		name: 'tolerance',
		signature: 'tolerance(x, a)',
		help: 'A part with a tolerance: anywhere within ±a of its value, rectangular.',
		examples: [{ source: 'tolerance(100 kohm, 1 %)', result: '100.0 kΩ ± 1.1 kΩ' }],
		source: 'JCGM 100:2008, 4.3.7',
	},
	[2, 2],
	[1],
	([a = 0]) => distribution(a),
);
