import { rectangular } from '../doubt/distributions/rectangular';
import { difference } from './stated';
import { scalar, type CalcFunction } from './function';
import { lsb } from './lsb';

export const quantisation: CalcFunction = {
	name: 'quantisation',
	signature: 'quantisation(Vref, bits)',
	help: 'The error of rounding to a code: 0 within ± half a step of Vref/2^bits, rectangular.',
	examples: [{ source: 'quantisation(3.3 V, 12)', result: '0 µV ± 460 µV' }],
	source: 'JCGM 100:2008, F.2.2.1',
	count: [2, 2],
	type: (args) => difference(lsb.type(args)),
	compute: () => 0,
	states: {
		centred: false,
		widths: [],
		distribution: (args) => rectangular(scalar(lsb.compute(args), 'The step') / 2),
	},
};
