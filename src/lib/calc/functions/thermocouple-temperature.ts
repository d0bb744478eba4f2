import { isRefusal } from '../tables/refusal';
import { thermocoupleTemperature as table, thermocoupleVoltage } from '../tables/thermocouples';
import { expectTemperature, expectUnit, inCelsius, toCelsius, toKelvin } from './in-unit';
import { expectText } from './quoted';
import { tabled } from './tabled';
import { typeOf } from './thermocouple-type';

const perVolt = 1e3;

export const thermocoupleTemperature = tabled({
	name: 'thermocoupleTemperature',
	signature: 'thermocoupleTemperature("K", V[, Tref])',
	help: 'Temperature of the measuring junction of a thermocouple from its voltage, with the reference junction at 0 °C or at Tref.',
	examples: [
		{ source: 'thermocoupleTemperature("K", 4.096 mV)', result: '99.9944 °C' },
		{ source: 'thermocoupleTemperature("K", 10 mV, 25 degC)', result: '270.714 °C' },
	],
	source: 'NIST Monograph 175 (ITS-90), solved for the temperature',
	count: [2, 3],
	listAt: 1,
	effort: () => 20,
	names: { e: 'V' },
	type: ([type, voltage, reference]) => {
		expectText(type, 'The type of a thermocouple', 'K');
		expectUnit(voltage, 'V', 'The voltage');
		expectTemperature(reference, 'The temperature of the reference junction');
		return inCelsius;
	},
	answer: ([letter, voltage, reference]) => {
		const type = typeOf(letter);
		const cold =
			reference === undefined
				? { value: 0, derivatives: [] }
				: thermocoupleVoltage(type, toCelsius(Number(reference)));
		if (isRefusal(cold))
			return { ...cold, argument: 'Tref', message: `Tref${cold.message.slice(1)}` };
		const hot = table(type, Number(voltage) * perVolt + cold.value);
		if (isRefusal(hot)) return hot;
		const [slope = 0] = hot.derivatives;
		return {
			value: toKelvin(hot.value),
			derivatives: [0, slope * perVolt, slope * (cold.derivatives[0] ?? 0)],
		};
	},
});
