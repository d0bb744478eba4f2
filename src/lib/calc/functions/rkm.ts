import { isRefusal } from '../tables/refusal';
import { readValueCode } from '../tables/value-codes';
import { Trouble } from '../trouble';
import { pure, unknown, type Type } from '../types';
import { answered, sentence } from './answered';
import type { Argument, CalcFunction } from './function';
import { inUnit } from './in-unit';
import { expectText, quoted } from './quoted';

/** Ohms or farads, as the letter of the code says; so the code must be known before anything is computed. */
function typeOf(code: Argument): Type {
	expectText(code, 'A value code', '4k7');
	if (code.type.kind === 'unknown') return unknown;
	if (code.type.text === undefined)
		throw new Trouble('value', code, 'A value code is read where it is typed in quotes.', {
			mend: 'Write `rkm("4k7")`, say.',
		});
	const read = readValueCode(code.type.text);
	if (isRefusal(read))
		throw new Trouble('value', code, sentence(read), read.mend === undefined ? {} : read);
	return inUnit(read.kind === 'resistance' ? 'ohm' : 'F');
}

export const rkm: CalcFunction = {
	name: 'rkm',
	signature: 'rkm("4k7")',
	help: 'The value that a part is marked with, its letter at the decimal point: L, R, K, M, G and T for resistors, p, n and u for capacitors. A letter of tolerance behind it is read and counts for nothing here.',
	examples: [
		{ source: 'rkm("4k7")', result: '4.7 kΩ' },
		{ source: 'rkm("R47")', result: '470 mΩ' },
		{ source: 'rkm("4p7")', result: '4.7 pF' },
	],
	source: 'IEC 60062:2016',
	count: [1, 1],
	type: ([code]) => (code ? typeOf(code) : pure),
	compute: ([code]) => answered(readValueCode(quoted(code))).value,
};
