import type { CalcFunction } from './function';
import { choose, preferredType } from './preferred-type';

export const preferredBelow: CalcFunction = {
	name: 'preferredBelow',
	signature: 'preferredBelow(x, E24)',
	help: 'The largest preferred value of a series that is not above x.',
	examples: [
		{ source: 'preferredBelow(28.205 kohm, E24)', result: '27 kΩ' },
		{ source: 'preferredBelow(9.9, E6)', result: '6.8' },
	],
	source: 'IEC 60063:2015',
	count: [2, 2],
	ofEstimate: true,
	type: preferredType,
	compute: (args) => choose(args, (_, below) => below),
};
