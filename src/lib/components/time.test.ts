import { afterEach, beforeEach, expect, test } from 'vitest';
import { ago, day, moment } from './time';

const at = '2026-10-14T23:12:40.000Z';
const now = Date.parse(at);
const zone = process.env.TZ;

beforeEach(() => {
	process.env.TZ = 'Pacific/Kiritimati';
});
afterEach(() => {
	if (zone === undefined) delete process.env.TZ;
	else process.env.TZ = zone;
});

test('a time reads the same wherever the reader is', () => {
	expect(new Date(at).getDate(), 'the zone of this test is another day').toBe(15);
	expect(day(at)).toBe('14 Oct 2026');
	expect(moment(at)).toBe('14 Oct 2026, 23:12 UTC');
});

test('a time with an offset is shown in UTC', () => {
	expect(moment('2026-01-01T00:30:00+02:00')).toBe('31 Dec 2025, 22:30 UTC');
});

test('a change is told in minutes, hours, then by its date', () => {
	expect(ago(at, now + 59_999)).toBe('just now');
	expect(ago(at, now + 60_000)).toBe('1 min ago');
	expect(ago(at, now + 3_599_000)).toBe('59 min ago');
	expect(ago(at, now + 3_600_000)).toBe('1 h ago');
	expect(ago(at, now + 86_399_000)).toBe('23 h ago');
	expect(ago(at, now + 86_400_000)).toBe('14 Oct 2026');
});

test('a change that lies ahead of a slow clock is told by its date', () => {
	expect(ago(at, now - 120_000)).toBe('14 Oct 2026');
});
