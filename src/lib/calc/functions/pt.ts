import { platinumResistance } from '../tables/platinum';
import { expectTemperature, expectUnit, inUnit, toCelsius } from './in-unit';
import { tabled } from './tabled';

export const pt = tabled({
	name: 'pt',
	signature: 'pt(T, R0)',
	help: 'Resistance of an industrial platinum thermometer of R0 at 0 °C, from −200 °C to 850 °C.',
	examples: [
		{ source: 'pt(60 degC, 100 ohm)', result: '123.242 Ω' },
		{ source: 'pt(-40 degC, 1 kohm)', result: '842.707 Ω' },
	],
	source: 'IEC 60751:2022',
	count: [2, 2],
	type: ([temperature, zero]) => {
		expectTemperature(temperature, 'The temperature');
		expectUnit(zero, 'ohm', 'The resistance at 0 °C');
		return inUnit('ohm');
	},
	answer: ([temperature, zero]) => platinumResistance(toCelsius(Number(temperature)), Number(zero)),
});
