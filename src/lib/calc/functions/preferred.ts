import type { CalcFunction } from './function';
import { choose, preferredType } from './preferred-type';

export const preferred: CalcFunction = {
	name: 'preferred',
	signature: 'preferred(x, E24)',
	help: 'The nearest preferred value of a series, E3 to E192. Nearest by ratio, as tolerances are.',
	examples: [
		{ source: 'preferred(28.205 kohm, E24)', result: '27 kΩ' },
		{ source: 'preferred(38.26 kohm, E96)', result: '38.3 kΩ' },
	],
	source: 'IEC 60063:2015',
	count: [2, 2],
	ofEstimate: true,
	type: preferredType,
	compute: (args) => choose(args, (x, below, above) => (x / below <= above / x ? below : above)),
};
