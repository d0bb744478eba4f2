import { expectSame, Refusal, refusePoint, scalar, type CalcFunction } from './function';
import { pure } from '../types';
import { map } from '../values';
import { expectBits, wholeBits } from './bits';

export const code: CalcFunction = {
	name: 'code',
	signature: 'code(V, Vref, bits)',
	help: 'The code of a unipolar converter: V/Vref times 2 to the number of bits, rounded down, held at the ends of the range.',
	examples: [
		{ source: 'code(1.65 V, 3.3 V, 12)', result: '2048' },
		{ source: 'code(5 V, 3.3 V, 12)', result: '4095' },
	],
	source: 'common practice, no source',
	count: [3, 3],
	type: ([value, reference, bits]) => {
		if (bits) expectBits(bits);
		if (value && reference) expectSame([value, reference], 'Compares');
		if (value) refusePoint(value, 'Converts');
		return pure;
	},
	compute: ([value = 0, reference, bits]) => {
		const range = scalar(reference, 'The reference');
		const codes = 2 ** wholeBits(bits);
		if (!(range > 0)) throw new Refusal('The reference is above zero.');
		// A value on a step must not fall below it by the last digit of the division.
		const step = (x: number) => Math.floor((x / range) * codes * (1 + 4 * Number.EPSILON));
		return map(value, (x) => Math.min(codes - 1, Math.max(0, step(x))));
	},
};
