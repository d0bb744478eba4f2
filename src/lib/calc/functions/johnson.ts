import { johnson as table } from '../tables/noise';
import { expectTemperature, expectUnit, inUnit } from './in-unit';
import { tabled } from './tabled';

export const johnson = tabled({
	name: 'johnson',
	signature: 'johnson(R, T, bandwidth)',
	help: 'Thermal noise voltage of a resistance at a temperature over a bandwidth, rms.',
	examples: [
		{ source: 'johnson(1 kohm, 290 K, 10 kHz)', result: '400.194 nV' },
		{ source: 'johnson(100 kohm, 25 degC, 1 Hz)', result: '40.5779 nV' },
	],
	source: 'Nyquist, Physical Review 32 (1928), 110–113; Boltzmann constant of the 2019 SI',
	count: [3, 3],
	type: ([resistance, temperature, bandwidth]) => {
		expectUnit(resistance, 'ohm', 'The resistance');
		expectTemperature(temperature, 'The temperature');
		expectUnit(bandwidth, 'Hz', 'The bandwidth');
		return inUnit('V');
	},
	answer: ([resistance, temperature, bandwidth]) =>
		table(Number(resistance), Number(temperature), Number(bandwidth)),
});
