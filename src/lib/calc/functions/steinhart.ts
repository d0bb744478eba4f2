import { steinhartTemperature } from '../tables/thermistors';
import { expectUnit, inCelsius } from './in-unit';
import { expectCoefficients } from './steinhart-type';
import { tabled } from './tabled';

export const steinhart = tabled({
	name: 'steinhart',
	signature: 'steinhart(R, a, b, c)',
	help: 'Temperature of a thermistor from its resistance: 1/T = a + b ln R + c (ln R)³, R in ohms and T in kelvin.',
	examples: [
		{ source: 'steinhart(10 kohm, 1.129241e-3, 2.341077e-4, 8.775468e-8)', result: '25 °C' },
	],
	source: 'Steinhart and Hart, Deep-Sea Research 15 (1968), 497–503',
	count: [4, 4],
	type: ([resistance, ...coefficients]) => {
		expectUnit(resistance, 'ohm', 'The resistance');
		expectCoefficients(coefficients);
		return inCelsius;
	},
	answer: ([resistance, a, b, c]) =>
		steinhartTemperature(Number(resistance), Number(a), Number(b), Number(c)),
});
