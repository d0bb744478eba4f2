import { ntcTemperature } from '../tables/thermistors';
import { expectTemperature, expectUnit, inCelsius } from './in-unit';
import { tabled } from './tabled';

export const ntcBetaTemperature = tabled({
	name: 'ntcBetaTemperature',
	signature: 'ntcBetaTemperature(R, R0, T0, beta)',
	help: 'Temperature of a thermistor that has R0 at T0, from its resistance and its beta value.',
	examples: [
		{ source: 'ntcBetaTemperature(3.588184 kohm, 10 kohm, 25 degC, 3950 K)', result: '50 °C' },
	],
	// The number of the standard is from memory.
	source: 'IEC 60539-1',
	count: [4, 4],
	type: ([resistance, r0, t0, beta]) => {
		expectUnit(resistance, 'ohm', 'The resistance');
		expectUnit(r0, 'ohm', 'The resistance at T0');
		expectTemperature(t0, 'The temperature T0');
		expectUnit(beta, 'K', 'The beta value');
		return inCelsius;
	},
	answer: ([resistance, r0, t0, beta]) =>
		ntcTemperature(Number(resistance), Number(r0), Number(t0), Number(beta)),
});
