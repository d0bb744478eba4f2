import { expect, it } from 'vitest';
import { quantisation, settling } from './conversion';
import { isRefusal, type Refusal } from './refusal';
import type { Worked } from './worked';

function valueOf(answer: Worked | Refusal): number {
	if (isRefusal(answer)) throw new Error(answer.message);
	return answer.value;
}

it.each([
	[8, '5.5'],
	[9, '6.24'],
	[10, '6.93'],
	[11, '7.62'],
	[12, '8.32'],
	[13, '9.01'],
])('%i bits settle to a step in %s time constants', (bits, printed) => {
	// Texas Instruments, Analog Engineer's Pocket Reference, SLYW038D, RC settling tables. Source seen, recomputed.
	const decimals = printed.split('.')[1]?.length ?? 0;
	expect(valueOf(settling(1, 1, bits, 1)).toFixed(decimals)).toBe(printed);
});

it('settles to half a step where nothing else is said', () => {
	// 9.01 time constants for 12 bits, 11.78 for 16: from memory, recomputed.
	expect(valueOf(settling(1, 1, 12)).toFixed(2)).toBe('9.01');
	expect(valueOf(settling(1, 1, 16)).toFixed(2)).toBe('11.78');
});

it('settles 10 kΩ and 12 pF to a quarter step of 6 and 12 bits', () => {
	// A public question on the settling of a converter's input (2015) prints 665.421 ns and 1164.448 ns; the second is
	// a slip of digits, its own formula gives 1164.487 ns.
	expect((valueOf(settling(10e3, 12e-12, 6, 0.25)) * 1e9).toFixed(3)).toBe('665.421');
	expect((valueOf(settling(10e3, 12e-12, 12, 0.25)) * 1e9).toFixed(3)).toBe('1164.487');
});

it('acquires the sample of a 120 pF hold capacitor as a data sheet works it out', () => {
	// Microchip PIC18CXX2, DS39026D, example 16-1: C_HOLD (R_IC + R_SS + R_S) ln(2047) = 9.61 µs, and DS39564C,
	// example 17-1, with ln(2048): 9.61 µs too. Source seen, recomputed. Half a step of 10 bits is ln(2048).
	expect((valueOf(settling(10_500, 120e-12, 10)) * 1e6).toFixed(2)).toBe('9.61');
});

it('halves a step for the quantisation error', () => {
	// 3.3 V, 12 bit: a step of 0.806 mV, 0.233 mV standard uncertainty (Analog Devices MT-001; JCGM 100, F.2.2.1).
	const half = valueOf(quantisation(3.3, 12));
	expect((half * 2 * 1e3).toFixed(3)).toBe('0.806');
	expect(((half / Math.sqrt(3)) * 1e3).toFixed(3)).toBe('0.233');
});

it.each([
	[() => settling(1e4, 1e-11, 12.5), 'bits must be a whole number from 1 to 32'],
	[() => settling(1e4, 1e-11, 0), 'bits must be a whole number from 1 to 32'],
	[() => settling(-1, 1e-11, 12), 'rs must be above zero'],
	[() => settling(1e4, 1e-11, 8, 256), 'The error allowed is the whole range'],
	[() => quantisation(3.3, 33), 'bits must be a whole number from 1 to 32'],
	[() => quantisation(Infinity, 12), 'vref is not a finite number'],
])('refuses what cannot be', (compute, message) => {
	const answer = compute();
	expect(isRefusal(answer) && answer.message).toContain(message);
});
