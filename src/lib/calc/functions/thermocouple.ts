import { isRefusal } from '../tables/refusal';
import { thermocoupleVoltage } from '../tables/thermocouples';
import { expectTemperature, inUnit, toCelsius } from './in-unit';
import { expectText } from './quoted';
import { tabled } from './tabled';
import { typeOf } from './thermocouple-type';

const millivolt = 1e-3;

export const thermocouple = tabled({
	name: 'thermocouple',
	signature: 'thermocouple("K", T[, Tref])',
	help: 'Voltage of a thermocouple of type K, J, T, N or S with its measuring junction at T and its reference junction at 0 °C or at Tref.',
	examples: [
		{ source: 'thermocouple("K", 100 degC)', result: '4.096 23 mV' },
		{ source: 'thermocouple("K", 100 degC, 25 degC)', result: '3.095 99 mV' },
	],
	source: 'NIST Monograph 175 (ITS-90), as IEC 60584-1 adopts it',
	count: [2, 3],
	listAt: 1,
	effort: () => 3,
	type: ([type, temperature, reference]) => {
		expectText(type, 'The type of a thermocouple', 'K');
		expectTemperature(temperature, 'The temperature');
		expectTemperature(reference, 'The temperature of the reference junction');
		return inUnit('V');
	},
	answer: ([letter, temperature, reference]) => {
		const type = typeOf(letter);
		const measuring = thermocoupleVoltage(type, toCelsius(Number(temperature)));
		if (isRefusal(measuring)) return measuring;
		const [slope = 0] = measuring.derivatives;
		if (reference === undefined)
			return { value: measuring.value * millivolt, derivatives: [0, slope * millivolt] };
		const cold = thermocoupleVoltage(type, toCelsius(Number(reference)));
		if (isRefusal(cold))
			return { ...cold, argument: 'Tref', message: `Tref${cold.message.slice(1)}` };
		return {
			value: (measuring.value - cold.value) * millivolt,
			derivatives: [0, slope * millivolt, -(cold.derivatives[0] ?? 0) * millivolt],
		};
	},
});
