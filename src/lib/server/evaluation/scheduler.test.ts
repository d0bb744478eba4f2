import { expect, test, vi } from 'vitest';
import { sourceOf } from '$lib/calc/cells';
import type { Cell, Evaluation } from '$lib/calc/results';
import { Scheduler, type Evaluated } from './scheduler';

const results: Omit<Evaluation, 'engine'> = {
	quantities: {},
	lines: [],
	requirements: [],
	figures: [],
	errors: [],
};

/** A document that is a number, and an evaluator whose answers the test lets go one by one. */
function bench() {
	const document = { version: 0, title: '', source: '0' };
	const running: { source: string; answer: (error?: Error) => void }[] = [];
	const shown: Evaluated[] = [];
	const compute = (cells: readonly Cell[]) =>
		new Promise<Evaluation>((resolve, reject) => {
			const source = sourceOf(cells[0]!);
			const answer = (error?: Error) =>
				error ? reject(error) : resolve({ engine: source, ...results });
			running.push({ source, answer });
		});
	const scheduler = new Scheduler(
		() => ({
			version: document.version,
			content: {
				title: document.title,
				cells: [{ id: 'a', kind: 'calculation', source: document.source }],
			},
		}),
		(evaluated) => shown.push(evaluated),
		'note',
		compute,
	);
	const change = (source: string, title = document.title) => {
		Object.assign(document, { version: document.version + 1, source, title });
		scheduler.request();
	};
	return { scheduler, running, shown, change };
}

const turn = () => new Promise((resolve) => setImmediate(resolve));

test('one evaluation is in flight, and the newest state is next', async () => {
	const { scheduler, running, shown, change } = bench();
	for (const source of ['1', '2']) change(source);
	await turn();
	for (const source of ['3', '4', '5']) change(source);
	await turn();
	expect(running.map(({ source }) => source)).toEqual(['2']);
	running[0]!.answer();
	await turn();
	expect(running.map(({ source }) => source)).toEqual(['2', '5']);
	running[1]!.answer();
	await scheduler.idle();
	expect(shown.map(({ version, results: { engine } }) => [version, engine])).toEqual([
		[2, '2'],
		[5, '5'],
	]);
	expect(scheduler.last).toBe(shown[1]);
});

test('a change of the title alone is shown with the results that are there', async () => {
	const { scheduler, running, shown, change } = bench();
	change('1');
	await turn();
	running[0]!.answer();
	await scheduler.idle();
	change('1', 'Divider');
	await scheduler.idle();
	expect(running).toHaveLength(1);
	expect(shown.map(({ version, content }) => [version, content.title])).toEqual([
		[1, ''],
		[2, 'Divider'],
	]);
	expect(shown[1]!.results).toBe(shown[0]!.results);
});

test('after an evaluation that failed the next change is evaluated', async () => {
	const { scheduler, running, shown, change } = bench();
	change('1');
	await turn();
	running[0]!.answer(new Error('no evaluator'));
	await scheduler.idle();
	change('2');
	await turn();
	running[1]!.answer();
	await scheduler.idle();
	expect(shown.map(({ version }) => version)).toEqual([2]);
});

test('an evaluation that failed is tried again although nothing changes, until it succeeds', async () => {
	const { scheduler, running, shown, change } = bench();
	change('1');
	await turn();
	for (let failure = 0; failure < 2; failure++) {
		running[failure]!.answer(new Error('no evaluator'));
		await vi.waitFor(() => expect(running).toHaveLength(failure + 2));
	}
	running[2]!.answer();
	await scheduler.idle();
	expect(shown.map(({ version }) => version)).toEqual([1]);
	expect(running).toHaveLength(3);
});
