import { ntcResistance } from '../tables/thermistors';
import { expectTemperature, expectUnit, inUnit } from './in-unit';
import { tabled } from './tabled';

export const ntcBeta = tabled({
	name: 'ntcBeta',
	signature: 'ntcBeta(T, R0, T0, beta)',
	help: 'Resistance of a thermistor that has R0 at T0, by its beta value: R0 exp(beta (1/T − 1/T0)).',
	examples: [{ source: 'ntcBeta(50 degC, 10 kohm, 25 degC, 3950 K)', result: '3.588 18 kΩ' }],
	// The number of the standard is from memory.
	source: 'IEC 60539-1',
	count: [4, 4],
	type: ([temperature, r0, t0, beta]) => {
		expectTemperature(temperature, 'The temperature');
		expectUnit(r0, 'ohm', 'The resistance at T0');
		expectTemperature(t0, 'The temperature T0');
		expectUnit(beta, 'K', 'The beta value');
		return inUnit('ohm');
	},
	answer: ([temperature, r0, t0, beta]) =>
		ntcResistance(Number(temperature), Number(r0), Number(t0), Number(beta)),
});
