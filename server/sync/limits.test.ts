import { afterEach, beforeEach, expect, test, vi } from 'vitest';
import { Allowance } from './limits';

beforeEach(() => vi.useFakeTimers());
afterEach(() => vi.useRealTimers());

function takeWhileAllowed(allowance: Allowance, bytes: number): number {
	let taken = 0;
	while (taken < 100_000 && allowance.take(bytes)) taken += 1;
	return taken;
}

test('a burst is allowed, then no more than the steady rate', () => {
	const allowance = new Allowance();
	expect(takeWhileAllowed(allowance, 10)).toBe(1000);
	vi.advanceTimersByTime(1000);
	expect(takeWhileAllowed(allowance, 10)).toBeGreaterThan(150);
	expect(allowance.take(10)).toBe(false);
});

test('few messages with many bytes are limited too', () => {
	expect(takeWhileAllowed(new Allowance(), 1024 * 1024)).toBe(8);
});

test('typing fast for ten minutes is never limited', () => {
	const allowance = new Allowance();
	let refused = 0;
	for (let second = 0; second < 600; second += 1) {
		for (let key = 0; key < 40; key += 1) if (!allowance.take(60)) refused += 1;
		vi.advanceTimersByTime(1000);
	}
	expect(refused).toBe(0);
});
