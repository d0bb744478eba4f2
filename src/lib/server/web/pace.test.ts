import { expect, test } from 'vitest';
import { Pace } from './pace';

/** A pace with a clock that stands still until it is moved. */
function paced(bounds: Partial<ConstructorParameters<typeof Pace>[0]> = {}) {
	let now = 0;
	const pace = new Pace(
		{ who: 'Your scripts', atOnce: 2, burst: 3, perSecond: 2, ...bounds },
		() => now,
	);
	return { pace, pass: (ms: number) => (now += ms) };
}

const done = () => Promise.resolve('done');
const tooMany = (waitMs: number) => ({ code: 'tooMany', details: { waitMs } });

test('a burst is free, then one request counts each half second', async () => {
	const { pace, pass } = paced();
	for (let i = 0; i < 3; i++) expect(await pace.run('robin', done)).toBe('done');
	await expect(pace.run('robin', done)).rejects.toMatchObject(tooMany(500));
	pass(499);
	await expect(pace.run('robin', done)).rejects.toMatchObject({ code: 'tooMany' });
	pass(1);
	expect(await pace.run('robin', done)).toBe('done');
	await expect(pace.run('robin', done)).rejects.toMatchObject(tooMany(500));
});

test('nobody waits for the scripts of somebody else', async () => {
	const { pace } = paced({ burst: 1 });
	await pace.run('robin', done);
	expect(await pace.run('wren', done)).toBe('done');
	await expect(pace.run('robin', done)).rejects.toMatchObject({ code: 'tooMany' });
});

test('so many are under way at once, and one that failed is not', async () => {
	const { pace } = paced({ burst: 10 });
	let end: () => void = () => undefined;
	const long = pace.run('robin', () => new Promise<void>((resolve) => (end = resolve)));
	const failing = pace.run('robin', () => Promise.reject(new Error('no')));
	await expect(pace.run('robin', done)).rejects.toMatchObject(tooMany(1000));
	await expect(failing).rejects.toThrow('no');
	expect(await pace.run('robin', done)).toBe('done');
	end();
	await long;
});

test('whoever has rested long enough is forgotten', async () => {
	const { pace, pass } = paced();
	for (const person of ['robin', 'wren', 'finch']) await pace.run(person, done);
	expect(pace.size).toBe(3);
	pass(500);
	await pace.run('robin', done);
	expect(pace.size).toBe(1);
});
