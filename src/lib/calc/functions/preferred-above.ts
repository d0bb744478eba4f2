import type { CalcFunction } from './function';
import { choose, preferredType } from './preferred-type';

export const preferredAbove: CalcFunction = {
	name: 'preferredAbove',
	signature: 'preferredAbove(x, E24)',
	help: 'The smallest preferred value of a series that is not below x.',
	examples: [
		{ source: 'preferredAbove(28.205 kohm, E24)', result: '30 kΩ' },
		{ source: 'preferredAbove(9.3, E12)', result: '10' },
	],
	source: 'IEC 60063:2015',
	count: [2, 2],
	ofEstimate: true,
	type: preferredType,
	compute: (args) => choose(args, (_, __, above) => above),
};
