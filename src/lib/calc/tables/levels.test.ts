import { expect, it } from 'vitest';
import { level, ratioOf } from './decibels';
import { johnson } from './noise';
import { isRefusal, type Refusal } from './refusal';
import type { Worked } from './worked';

function valueOf(answer: Worked | Refusal): number {
	if (isRefusal(answer)) throw new Error(answer.message);
	return answer.value;
}

it('gives the levels and ratios of common tables', () => {
	// NIST SP 811 (2008), 8.7; figures from memory, recomputed.
	expect(valueOf(ratioOf(3, 'power')).toFixed(3)).toBe('1.995');
	expect(valueOf(ratioOf(6, 'amplitude')).toFixed(3)).toBe('1.995');
	expect(valueOf(level(10, 1, 'power'))).toBe(10);
	expect(valueOf(level(10, 1, 'amplitude'))).toBe(20);
	expect(valueOf(level(1, 1e-3, 'power'))).toBe(30);
	// 0 dBm across 50 Ω is 223.6 mV, 0 dBV is 2.218 dB above the voltage of 0 dBm across 600 Ω.
	expect((Math.sqrt(valueOf(ratioOf(0, 'power')) * 1e-3 * 50) * 1e3).toFixed(1)).toBe('223.6');
	expect(valueOf(level(1, Math.sqrt(0.6), 'amplitude')).toFixed(3)).toBe('2.218');
});

it('levels and ratios undo each other', () => {
	for (const of of ['amplitude', 'power'] as const)
		for (const decibels of [-173.9, -3, 0, 0.1, 96])
			expect(valueOf(level(valueOf(ratioOf(decibels, of)), 1, of))).toBeCloseTo(decibels, 11);
});

it('gives thermal noise', () => {
	// 1 kΩ over 10 kHz at 290 K: 400 nV (a public tutorial; source seen). 1 kΩ at 300 K: 4.07 nV/√Hz, 50 Ω at 290 K:
	// 0.895 nV/√Hz (from memory, recomputed).
	expect((valueOf(johnson(1e3, 290, 1e4)) * 1e9).toFixed(0)).toBe('400');
	expect((valueOf(johnson(1e3, 300, 1)) * 1e9).toFixed(2)).toBe('4.07');
	expect((valueOf(johnson(50, 290, 1)) * 1e9).toFixed(3)).toBe('0.895');
	// 100 kΩ over 1 MHz at 300 K: a tutorial prints 40.69 µV with k = 1.38e-23 J/K; the exact constant gives 40.70 µV.
	expect((valueOf(johnson(1e5, 300, 1e6)) * 1e6).toFixed(2)).toBe('40.70');
});

it.each([
	[() => level(0, 1, 'power'), 'quantity must be above zero'],
	[() => level(1, -1, 'power'), 'reference must be above zero'],
	[() => ratioOf(NaN, 'power'), 'decibels is not a finite number'],
	[() => ratioOf(1e5, 'amplitude'), 'The ratio at this level is beyond what a number holds'],
	[() => johnson(1e3, 0, 1), 't must be above zero'],
])('refuses what cannot be', (compute, message) => {
	const answer = compute();
	expect(isRefusal(answer) && answer.message).toBe(message);
});
