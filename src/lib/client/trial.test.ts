import { afterEach, beforeEach, expect, test, vi } from 'vitest';
import type { TrialAnswer, TrialChange } from '$lib/schemas/trial';
import { Trial } from './trial.svelte';

const asked: { changes: TrialChange[]; answer: (name?: string) => void }[] = [];
const nothing: TrialAnswer = {
	quantities: [],
	requirements: [],
	figures: [],
	faults: [],
	sweeps: [],
	gone: [],
};

beforeEach(() => {
	asked.length = 0;
	vi.stubGlobal('fetch', (address: string, { method, body }: RequestInit) => {
		const json = (value: unknown) => new Response(JSON.stringify(value));
		if (method === 'GET') return Promise.resolve(json(address.endsWith('trial') ? {} : []));
		const { changes } = JSON.parse(body as string) as { changes: TrialChange[] };
		return new Promise((resolve) => {
			const answer = (name = changes.map(({ to }) => to).join()) => {
				const moved = { name, before: null, after: null, difference: null, share: null };
				resolve(json({ ...nothing, quantities: [moved] }));
			};
			asked.push({ changes, answer });
		});
	});
});
afterEach(() => void vi.unstubAllGlobals());

const change = (to: string) => ({ name: 'R1', from: '1', to });
const names = (trial: Trial) => trial.answer.quantities.map(({ name }) => name);
const question = (count: number) =>
	vi.waitFor(() => {
		expect(asked).toHaveLength(count);
		return asked[count - 1]!;
	});

test('while an answer is awaited only the newest question is kept', async () => {
	const trial = new Trial('MN-001');
	trial.begin();
	for (const to of ['2', '3', '4']) trial.set(change(to));
	(await question(1)).answer();
	await vi.waitFor(() => expect(names(trial)).toEqual(['4']));
	trial.set(change('5'));
	const fifth = await question(2);
	for (const to of ['6', '7']) trial.set(change(to));
	fifth.answer();
	const last = await question(3);
	expect(last.changes).toEqual([change('7')]);
	expect(names(trial)).toEqual(['5']);
	last.answer();
	await vi.waitFor(() => expect(names(trial)).toEqual(['7']));
	expect(asked).toHaveLength(3);
});

test('an answer to a trial that was ended or begun anew counts for nothing', async () => {
	const trial = new Trial('MN-001');
	trial.begin([change('2')]);
	const first = await question(1);
	trial.close();
	first.answer('late');
	trial.begin([change('3')]);
	const second = await question(2);
	expect(names(trial)).toEqual([]);
	second.answer();
	await vi.waitFor(() => expect(names(trial)).toEqual(['3']));
	trial.drop('R1');
	await vi.waitFor(() => expect(names(trial)).toEqual([]));
	expect(trial.changed).toEqual([]);
});
