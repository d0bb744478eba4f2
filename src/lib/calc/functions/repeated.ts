import { repeated as readings } from '../doubt/distributions/repeated';
import { expectSame, Refusal, type CalcFunction } from './function';
import { gathered } from './gathered';

export const repeated: CalcFunction = {
	name: 'repeated',
	signature: 'repeated(r1, r2, …)',
	help: 'Readings of one quantity under the same conditions (Type A): their mean, with s/√n and n − 1 degrees of freedom.',
	examples: [{ source: 'repeated(10.1 V, 10.2 V, 10.3 V)', result: '10.20 V ± 0.25 V' }],
	source: 'JCGM 100:2008, 4.2',
	count: [1, Infinity],
	type: (args) => expectSame(args, 'Averages'),
	compute: (args) => {
		const found = readings(gathered(args));
		if ('fault' in found) throw new Refusal(`${found.message}.`);
		return found.mean;
	},
	states: {
		centred: false,
		widths: [],
		distribution: (args) => {
			const found = readings(gathered(args));
			return 'fault' in found ? found : found.distribution;
		},
	},
};
