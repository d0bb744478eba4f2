import { plainValue } from './plain-value';
import { expectNumber, refusePoint, type CalcFunction } from './function';
import { pure } from '../types';
import { map } from '../values';
import { expectBits, wholeBits } from './bits';
import { mapNodes } from '../traced';

export const lsb: CalcFunction = {
	name: 'lsb',
	signature: 'lsb(Vref, bits)',
	help: 'One step of a converter: the reference divided by 2 to the number of bits.',
	examples: [{ source: 'lsb(3.3 V, 12)', result: '805.664 µV' }],
	source: 'Analog Devices MT-001 (step as full scale / 2^N)',
	count: [2, 2],
	type: ([reference, bits]) => {
		if (bits) expectBits(bits);
		if (!reference) return pure;
		expectNumber(reference, 'Divides');
		refusePoint(reference, 'Divides');
		return reference.type;
	},
	compute: ([reference = 0, bits]) => map(reference, (range) => range / 2 ** wholeBits(bits)),
	trace: (tape, [reference, bits]) => {
		const codes = tape.constant(2 ** wholeBits(plainValue(bits!, 'The number of bits')));
		return mapNodes(tape, reference!, (range) => tape.binary('div', range, codes));
	},
};
