import { findDividers } from '../tables/divider-search';
import { list } from '../values';
import { answered } from './answered';
import { Refusal, scalar, type CalcFunction } from './function';
import { expectUnit, inUnit } from './in-unit';
import { expectSeries } from './preferred-type';

export const findDivider: CalcFunction = {
	name: 'findDivider',
	signature: 'findDivider(Vin, Vout, series[, mostRsource[, mostI[, Rload]]])',
	help: 'Upper and lower resistor of the divider that comes nearest to Vout, as a list: single parts of a series from 100 Ω to 1 MΩ, at most 5 % off. A source resistance and a current that it may have at most, and the load on its output, can be given.',
	examples: [
		{ source: 'findDivider(15 V, 3.3 V, E24)', result: '[390, 110] kΩ' },
		{ source: 'findDivider(15 V, 3.3 V, E24, 5 kohm, 1 mA)', result: '[22, 6.2] kΩ' },
	],
	source: 'IEC 60063:2015 for the parts; every pair is compared',
	count: [3, 6],
	ofEstimate: true,
	cost: () => 20_000,
	type: ([input, output, series, source, current, load]) => {
		expectUnit(input, 'V', 'The input');
		expectUnit(output, 'V', 'The output');
		if (series) expectSeries(series, 'The third value');
		expectUnit(source, 'ohm', 'The source resistance');
		expectUnit(current, 'A', 'The current');
		expectUnit(load, 'ohm', 'The load');
		return inUnit('ohm');
	},
	compute: ([input, output, series, source, current, load]) => {
		if (typeof series !== 'string') throw new Refusal('The third value is a series such as E24.');
		const question = {
			inputVoltage: scalar(input, 'The input'),
			outputVoltage: scalar(output, 'The output'),
			series,
			most: 1,
			...(source !== undefined && {
				sourceResistance: { atMost: scalar(source, 'The source resistance') },
			}),
			...(current !== undefined && { current: { atMost: scalar(current, 'The current') } }),
			...(load !== undefined && { load: scalar(load, 'The load') }),
		};
		const names = {
			inputVoltage: 'Vin',
			outputVoltage: 'Vout',
			load: 'Rload',
			sourceResistance: 'mostRsource',
			current: 'mostI',
		};
		const [best] = answered(findDividers(question), names);
		if (!best) throw new Refusal('No pair was found.');
		return list(Float64Array.of(best.upper.resistance, best.lower.resistance));
	},
};
