import { normal as distribution } from '../doubt/distributions/normal';
import { stated } from './stated';

export const normal = stated(
	{
		name: 'normal',
		signature: 'normal(x, u[, k])',
		help: 'A value with standard uncertainty u, or with expanded uncertainty U and coverage factor k; normal distribution.',
		examples: [
			{ source: 'normal(2.5 V, 1 mV)', result: '2.5000 V ± 0.0020 V' },
			{ source: 'normal(100 ohm, 6 mohm, 2)', result: '100.0000 Ω ± 0.0059 Ω' },
		],
		source: 'JCGM 100:2008, 4.3.3',
	},
	[2, 3],
	[1],
	([u = 0, k]) => distribution(u, k),
);
