import { platinumTemperature } from '../tables/platinum';
import { expectUnit, inCelsius, toKelvin } from './in-unit';
import { rescaled, tabled } from './tabled';

export const ptTemperature = tabled({
	name: 'ptTemperature',
	signature: 'ptTemperature(R, R0)',
	help: 'Temperature of an industrial platinum thermometer of R0 at 0 °C, from its resistance.',
	examples: [
		{ source: 'ptTemperature(138.5055 ohm, 100 ohm)', result: '100 °C' },
		{ source: 'ptTemperature(1.0973 kohm, 1 kohm)', result: '24.988 °C' },
	],
	source: 'IEC 60751:2022',
	count: [2, 2],
	effort: () => 5,
	type: ([resistance, zero]) => {
		expectUnit(resistance, 'ohm', 'The resistance');
		expectUnit(zero, 'ohm', 'The resistance at 0 °C');
		return inCelsius;
	},
	answer: ([resistance, zero]) =>
		rescaled(platinumTemperature(Number(resistance), Number(zero)), toKelvin, []),
});
