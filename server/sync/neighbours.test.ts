import type { ProcessHint } from '$lib/server/db/notify';
import { afterEach, beforeEach, expect, test, vi } from 'vitest';
import { Neighbours } from './neighbours';
import type { Entry } from './people';

let sent: ProcessHint[];
let neighbours: Neighbours;
beforeEach(() => {
	vi.useFakeTimers();
	sent = [];
	neighbours = new Neighbours((hint) => Promise.resolve(void sent.push(hint)));
});
afterEach(() => vi.useRealTimers());

const note = (index: number) => `00000000-0000-4000-8000-${String(index).padStart(12, '0')}`;
const someone = (clientId: number, clock: number): Entry => ({
	clientId,
	clock,
	state: {
		cellId: 'a'.repeat(40),
		user: { id: 'p', name: 'Ö'.repeat(300), color: '', colorLight: '' },
	},
});

test('a process that is alone says nothing of its notes', async () => {
	neighbours.announce(note(1), 7);
	neighbours.sayPeople(note(1), [someone(1, 1)]);
	await vi.advanceTimersByTimeAsync(1000);
	expect(sent).toEqual([]);
	neighbours.beat();
	expect(neighbours.hear(sent[0]!.from)).toBe('own');
	expect(neighbours.exist).toBe(false);
});

test('another process is a neighbour until nothing was heard of it for 15 s', async () => {
	expect(neighbours.hear('other')).toBe('new');
	expect(neighbours.hear('other')).toBe('known');
	await vi.advanceTimersByTimeAsync(14_000);
	expect(neighbours.exist).toBe(true);
	await vi.advanceTimersByTimeAsync(2000);
	expect(neighbours.exist).toBe(false);
});

test('what changes often is told once, with what it is in the end', async () => {
	neighbours.hear('other');
	for (let clock = 1; clock <= 50; clock += 1) {
		neighbours.announce(note(1), clock);
		neighbours.sayPeople(note(1), [someone(1, clock), { clientId: 2, clock, state: null }]);
	}
	await vi.advanceTimersByTimeAsync(200);
	expect(sent).toHaveLength(1);
	expect(sent[0]!.seqs).toEqual({ [note(1)]: 50 });
	expect(sent[0]!.people?.[note(1)]).toEqual([
		[1, 50, someone(1, 50).state],
		[2, 50, null],
	]);
});

test('however many people there are, each hint is short enough, and all of them are told', async () => {
	neighbours.hear('other');
	for (let index = 0; index < 300; index += 1) {
		neighbours.announce(note(index), index);
		neighbours.sayPeople(note(index % 7), [someone(index, 1)]);
	}
	await vi.advanceTimersByTimeAsync(200);
	const bytes = sent.map((hint) => Buffer.byteLength(JSON.stringify(hint)));
	expect(Math.max(...bytes)).toBeLessThan(8000);
	const told = sent.flatMap(({ people }) =>
		Object.values(people ?? {})
			.flat()
			.map(([id]) => id),
	);
	expect(told.sort((a, b) => a - b)).toEqual(Array.from({ length: 300 }, (_, index) => index));
	expect(sent.flatMap(({ seqs }) => Object.keys(seqs ?? {}))).toHaveLength(300);
});
