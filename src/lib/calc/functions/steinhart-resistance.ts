import { steinhartResistance as table } from '../tables/thermistors';
import { expectTemperature, inUnit } from './in-unit';
import { expectCoefficients } from './steinhart-type';
import { tabled } from './tabled';

export const steinhartResistance = tabled({
	name: 'steinhartResistance',
	signature: 'steinhartResistance(T, a, b, c)',
	help: 'Resistance of a thermistor at a temperature, by the coefficients of `steinhart`.',
	examples: [
		{
			source: 'steinhartResistance(50 degC, 1.129241e-3, 2.341077e-4, 8.775468e-8)',
			result: '3.6011 kΩ',
		},
	],
	source: 'Steinhart and Hart, Deep-Sea Research 15 (1968), 497–503, solved for R',
	count: [4, 4],
	effort: () => 10,
	type: ([temperature, ...coefficients]) => {
		expectTemperature(temperature, 'The temperature');
		expectCoefficients(coefficients);
		return inUnit('ohm');
	},
	answer: ([temperature, a, b, c]) => table(Number(temperature), Number(a), Number(b), Number(c)),
});
