import { inexactRectangular as distribution } from '../doubt/distributions/inexact-rectangular';
import { stated } from './stated';

export const inexactRectangular = stated(
	{
		name: 'inexactRectangular',
		signature: 'inexactRectangular(x, a, d)',
		help: 'A value within ±a where a itself is only known to ±d; both may be relative.',
		examples: [{ source: 'inexactRectangular(10 V, 1 V, 0.5 V)', result: '10.0 V ± 1.2 V' }],
		source: 'JCGM 101:2008, 6.4.3',
	},
	[3, 3],
	[1, 2],
	([a = 0, d = 0]) => distribution(a, d),
);
