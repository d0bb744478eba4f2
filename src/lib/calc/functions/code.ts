import { plainValue } from './plain-value';
import { expectSame, Refusal, refusePoint, scalar, type CalcFunction } from './function';
import { pure } from '../types';
import { map } from '../values';
import { expectBits, wholeBits } from './bits';
import { mapNodes, nodesOf } from '../traced';

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
	trace: (tape, [value, reference, bits]) => {
		const codes = 2 ** wholeBits(plainValue(bits!, 'The number of bits'));
		const range = nodesOf(tape, reference!)[0]!;
		return mapNodes(tape, value!, (x) => {
			const share = tape.binary('mul', tape.binary('div', x, range), tape.constant(codes));
			const step = tape.unary(
				'floor',
				tape.binary('mul', share, tape.constant(1 + 4 * Number.EPSILON)),
			);
			return tape.binary(
				'min',
				tape.constant(codes - 1),
				tape.binary('max', tape.constant(0), step),
			);
		});
	},
};
