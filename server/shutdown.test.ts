import { expect, test, vi } from 'vitest';
import { runSteps } from './shutdown';

vi.mock('$lib/server/log', () => ({
	log: () => ({ warn: () => 0, error: () => 0, info: () => 0 }),
}));

test('a step that never ends is left behind, and the later ones are still taken', async () => {
	vi.useFakeTimers();
	const taken: string[] = [];
	const stuck = () => new Promise<void>(() => taken.push('stuck'));
	const ending = runSteps([
		{ name: 'stuck', limitMs: 300, run: stuck },
		{ name: 'stuck again', limitMs: 200, run: stuck },
		{ name: 'last', limitMs: 100, run: () => Promise.resolve(taken.push('last')) },
	]);
	await vi.advanceTimersByTimeAsync(499);
	expect(taken).toEqual(['stuck', 'stuck']);
	await vi.advanceTimersByTimeAsync(1);
	expect(await ending).toBe(true);
	expect(taken).toEqual(['stuck', 'stuck', 'last']);
	vi.useRealTimers();
});

test('a step that fails is told, and the later ones are still taken', async () => {
	const taken: string[] = [];
	const good = await runSteps([
		{ name: 'broken', limitMs: 100, run: () => Promise.reject(new Error('broken')) },
		{ name: 'last', limitMs: 100, run: () => Promise.resolve(taken.push('last')) },
	]);
	expect(good).toBe(false);
	expect(taken).toEqual(['last']);
});
