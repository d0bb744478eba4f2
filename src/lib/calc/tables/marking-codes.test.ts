import fc from 'fast-check';
import { expect, it } from 'vitest';
import { readBands, writeBands } from './colour-bands';
import { isRefusal } from './refusal';
import { readValueCode, writeValueCode } from './value-codes';

it('reads the spellings that people type', () => {
	expect(readValueCode('4k7')).toEqual({ kind: 'resistance', value: 4_700 });
	expect(readValueCode(' 4p7 ')).toEqual({ kind: 'capacitance', value: 4.7e-12 });
	expect(readValueCode('2µ2')).toEqual({ kind: 'capacitance', value: 2.2e-6 });
	expect(readValueCode('4L7')).toEqual({ kind: 'resistance', value: 4.7e-3 });
	expect(readValueCode('4m7', 'resistance')).toEqual({ kind: 'resistance', value: 4.7e-3 });
	expect(readValueCode('4m7', 'capacitance')).toEqual({ kind: 'capacitance', value: 4.7e-3 });
});

it('reads tolerance letters, those of small capacitors in picofarads', () => {
	expect(readValueCode('10KK')).toEqual({
		kind: 'resistance',
		value: 10_000,
		tolerance: { lower: -0.1, upper: 0.1 },
	});
	expect(readValueCode('100nZ')).toMatchObject({ tolerance: { lower: -0.2, upper: 0.8 } });
	const small = readValueCode('5p0C');
	if (isRefusal(small)) throw new Error(small.message);
	expect(small.tolerance?.upper).toBeCloseTo(0.05, 15);
	expect(readValueCode('10pC')).toMatchObject({ tolerance: { lower: -0.0025, upper: 0.0025 } });
});

it.each(['', 'R', '4.7k', '47', '4k7k', '4k7 J', '0R0', '-4k7', '4x7', '4k7A', 'K47R', '1e9'])(
	'refuses %j as a value code',
	(text) => {
		expect(readValueCode(text)).toMatchObject({ argument: 'text' });
	},
);

it('asks what m means, and refuses a kind that the letter is not of', () => {
	expect(readValueCode('4m7')).toMatchObject({
		message: 'm may mean milliohms or millifarads here',
		mend: 'Write 4L7 for milliohms, or the farads in u.',
	});
	expect(readValueCode('4p7', 'resistance')).toMatchObject({ refused: 'text' });
});

it('writes a code that reads back as the value, of three characters at least', () => {
	const digits = fc.integer({ min: 1, max: 99_999 });
	const kind = fc.constantFrom('resistance' as const, 'capacitance' as const);
	fc.assert(
		fc.property(digits, fc.integer({ min: -1, max: 9 }), kind, (whole, exponent, of) => {
			const shift = of === 'resistance' ? exponent : exponent - 12;
			const value = Number(`${whole}e${shift}`);
			const code = writeValueCode(value, of);
			if (isRefusal(code)) throw new Error(`${value}: ${code.message}`);
			expect(code.length).toBeGreaterThanOrEqual(3);
			expect(readValueCode(code, of)).toEqual({ kind: of, value });
		}),
	);
});

it('refuses to round a value into a code, or to write one beyond the letters', () => {
	expect(writeValueCode(123_456, 'resistance')).toMatchObject({ argument: 'value' });
	expect(writeValueCode(1e20, 'resistance')).toMatchObject({ refused: 'outOfRange' });
	expect(writeValueCode(1e-20, 'capacitance')).toMatchObject({ refused: 'outOfRange' });
	expect(writeValueCode(0, 'resistance')).toMatchObject({ refused: 'notPositive' });
});

it('writes bands that read back', () => {
	fc.assert(
		fc.property(
			fc.integer({ min: 1, max: 999 }),
			fc.integer({ min: -2, max: 7 }),
			fc.constantFrom(0.1, 0.05, 0.02, 0.01, 0.005, 0.001),
			fc.constantFrom(undefined, 100e-6, 50e-6, 25e-6),
			(whole, exponent, tolerance, drift) => {
				const ohms = Number(`${whole}e${exponent}`);
				const bands = writeBands(ohms, { tolerance, ...(drift && { drift }) });
				if (isRefusal(bands)) return fc.pre(false);
				const read = readBands(bands);
				if (isRefusal(read)) throw new Error(read.message);
				expect(read.ohms).toBe(ohms);
				expect(read.tolerance).toBeCloseTo(tolerance, 15);
				if (drift === undefined) expect(read.drift).toBeUndefined();
				else expect(read.drift).toBeCloseTo(drift, 15);
			},
		),
	);
});

it('takes three bands for the 20 % of none', () => {
	expect(writeBands(4_700)).toEqual(['yellow', 'violet', 'red']);
	expect(readBands(['yellow', 'violet', 'red'])).toEqual({ ohms: 4_700, tolerance: 0.2 });
});

it.each([
	[readBands(['red', 'red']), 'Resistors have three to six bands, not 2'],
	[readBands(['red', 'gold', 'red']), 'Band 2, gold, does not stand for a digit'],
	[readBands(['red', 'red', 'red', 'black']), 'Band 4, black, does not stand for a tolerance'],
	[readBands(['red', 'red', 'constructor']), '"constructor" is no colour of a band'],
	[writeBands(1_234, { tolerance: 0.01 }), 'Bands hold three digits'],
	[writeBands(1_230), 'Three digits need a tolerance beside them'],
	[writeBands(4_700, { tolerance: 0.03 }), 'There is no colour for this tolerance'],
	[writeBands(4.7e12, { tolerance: 0.05 }), 'There is no colour for this multiplier'],
])('refuses bands that mean nothing', (answer, message) => {
	expect(isRefusal(answer) && answer.message).toBe(message);
});
