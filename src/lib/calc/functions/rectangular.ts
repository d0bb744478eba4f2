import { rectangular as distribution } from '../doubt/distributions/rectangular';
import { stated } from './stated';

export const rectangular = stated(
	{
		name: 'rectangular',
		signature: 'rectangular(x, a)',
		help: 'A value anywhere within ±a with the same likelihood; a may be relative, 1 % or 50 ppm.',
		examples: [{ source: 'rectangular(100 kohm, 1 %)', result: '100.0 kΩ ± 1.1 kΩ' }],
		source: 'JCGM 100:2008, 4.3.7',
	},
	[2, 2],
	[1],
	([a = 0]) => distribution(a),
);
