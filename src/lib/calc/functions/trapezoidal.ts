import { trapezoidal as distribution } from '../doubt/distributions/trapezoidal';
import { stated } from './stated';

export const trapezoidal = stated(
	{
		name: 'trapezoidal',
		signature: 'trapezoidal(x, a, b)',
		help: 'A value within ±a, equally likely within ±b and less so beyond; both may be relative.',
		examples: [{ source: 'trapezoidal(10 V, 1 V, 0.5 V)', result: '10.00 V ± 0.89 V' }],
		source: 'JCGM 101:2008, 6.4.4',
	},
	[3, 3],
	[1, 2],
	([a = 0, b = 0]) => distribution(a, b),
);
