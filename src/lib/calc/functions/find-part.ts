import { findParts } from '../tables/part-search';
import { answered } from './answered';
import { expectSame, Refusal, refusePoint, scalar, type CalcFunction } from './function';
import { expectSeries } from './preferred-type';

export const findPart: CalcFunction = {
	name: 'findPart',
	signature: 'findPart(x, series, least[, most])',
	help: 'The preferred value of a series nearest to x among those from least to most, both allowed. Nearest by ratio.',
	examples: [
		{ source: 'findPart(28.2 kohm, E24, 28.2 kohm)', result: '30 kΩ' },
		{ source: 'findPart(1 nF, E6, 1.2 nF, 5 nF)', result: '1.5 nF' },
	],
	source: 'IEC 60063:2015',
	count: [3, 4],
	ofEstimate: true,
	cost: () => 1_000,
	type: ([x, series, ...limits]) => {
		if (series) expectSeries(series, 'The second value');
		const type = expectSame([...(x ? [x] : []), ...limits], 'Compares');
		if (x) refusePoint({ ...x, type }, 'Preferred values are chosen for');
		return x?.type ?? type;
	},
	compute: ([x, series, least, most]) => {
		if (typeof series !== 'string') throw new Refusal('The second value is a series such as E24.');
		const question = {
			wanted: scalar(x, 'The value'),
			series,
			most: 1,
			atLeast: scalar(least, 'The least value'),
			...(most !== undefined && { atMost: scalar(most, 'The largest value') }),
		};
		const [best] = answered(findParts(question), { wanted: 'x' });
		if (!best) throw new Refusal('No part was found.');
		return best.resistance;
	},
};
