import { settling as table } from '../tables/conversion';
import { wholeBits, expectBits } from './bits';
import { expectPure } from './function';
import { expectUnit, inUnit } from './in-unit';
import { tabled } from './tabled';

export const settling = tabled({
	name: 'settling',
	signature: 'settling(Rs, C, bits[, errorLsb])',
	help: 'Time that a source resistance takes to charge the capacitor of a converter to within half a step, or another share of one, after a change over the whole range.',
	examples: [
		{ source: 'settling(10 kohm, 12 pF, 12)', result: '1.081 31 µs' },
		{ source: 'settling(10 kohm, 12 pF, 6, 0.25)', result: '665.421 ns' },
	],
	source: 'Texas Instruments SLYW038D, RC settling tables',
	count: [3, 4],
	type: ([rs, c, bits, error]) => {
		expectUnit(rs, 'ohm', 'The source resistance');
		expectUnit(c, 'F', 'The capacitance');
		if (bits) expectBits(bits);
		if (error) expectPure(error, 'The error in steps');
		return inUnit('s');
	},
	answer: ([rs, c, bits, error]) =>
		table(Number(rs), Number(c), wholeBits(bits), error === undefined ? undefined : Number(error)),
});
