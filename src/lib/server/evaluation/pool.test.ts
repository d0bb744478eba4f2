import { defaultOptions, evaluate } from '$lib/calc/evaluate';
import type { Cell, Evaluation } from '$lib/calc/results';
import { AppError } from '$lib/errors';
import { build } from 'esbuild';
import { options } from '../../../../server/local/bundle.mjs';
import { mkdtemp, readFile, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, afterEach, beforeAll, describe, expect, it } from 'vitest';
import { Pool, type PoolSettings } from './pool';

let folder = '';
let entry = '';
const pools: Pool[] = [];

beforeAll(async () => {
	folder = await mkdtemp(join(tmpdir(), 'halfdigit-'));
	entry = join(folder, 'evaluator.mjs');
	await build({ ...options(['evaluator']), outdir: folder, outExtension: { '.js': '.mjs' } });
}, 60_000);

afterEach(async () => {
	await Promise.all(pools.splice(0).map((pool) => pool.close()));
});

afterAll(() => rm(folder, { recursive: true, force: true }));

function open(settings: Partial<PoolSettings> = {}): Pool {
	const pool = new Pool({
		entry,
		size: 1,
		heapMegabytes: 192,
		residentMegabytes: 400,
		limitsMs: [10_000, 10_000, 10_000],
		longLimitsMs: [20_000, 20_000],
		...settings,
	});
	pools.push(pool);
	return pool;
}

function calculation(source: string): Cell[] {
	return [{ id: 'c', kind: 'calculation', source }];
}

/** Kills the evaluators that this test file started (Linux), and tells how many. */
async function killEvaluators(): Promise<number> {
	const file = `/proc/${process.pid}/task/${process.pid}/children`;
	const children = (await readFile(file, 'utf8')).split(' ').filter(Boolean).map(Number);
	let killed = 0;
	for (const pid of children) {
		const command = await readFile(`/proc/${pid}/cmdline`, 'utf8').catch(() => '');
		if (!command.includes(entry)) continue;
		process.kill(pid, 'SIGKILL');
		killed += 1;
	}
	return killed;
}

/** Lines that stay within the operations of a line and of a note but keep a processor busy for a while. */
const busy = Array.from({ length: 8 }, (_, i) => `busy${i} = max(((1:24000) * 0 + 170)!)`);
const mixed = [
	'a = 1 V',
	...busy,
	'b = a * 2',
	'c = busy0 + busy1 + busy2 + busy3 + busy4 + busy5 + busy6 + busy7',
];

describe('A pool of evaluators', () => {
	it('computes a note in a child', async () => {
		const results = await open().evaluate(calculation('x = 3 V\ny = x / 2 A'), defaultOptions);
		expect(results.quantities.y).toMatchObject({ value: 1.5, unit: 'ohm' });
	}, 30_000);

	it('computes several notes at once, each with its own answer', async () => {
		const pool = open({ size: 2 });
		const answers = await Promise.all(
			Array.from({ length: 20 }, (_, i) =>
				pool.evaluate(calculation(`x = ${i} * 2`), defaultOptions),
			),
		);
		expect(answers.map(({ quantities }) => quantities.x?.value)).toEqual(
			Array.from({ length: 20 }, (_, i) => i * 2),
		);
	}, 30_000);

	it('stops a child that takes too long, names the line and computes the others', async () => {
		// How fast this machine is decides which limit falls among the busy lines; one of them does.
		for (const limitMs of [10, 20, 40, 80, 160, 320]) {
			const results = await open({ limitsMs: [limitMs, 20_000, 20_000] }).evaluate(
				calculation(mixed.join('\n')),
				defaultOptions,
			);
			const [stopped, waiting] = results.errors;
			const line = mixed[(stopped?.line ?? 0) - 1] ?? '';
			if (!line.startsWith('busy')) continue;
			expect(stopped).toMatchObject({ cell: 'c', code: 'tooLong', from: 0, to: line.length });
			expect(waiting).toMatchObject({ line: mixed.length, code: 'waits' });
			expect(results.errors).toHaveLength(2);
			expect(results.quantities.b?.value).toBe(2);
			expect(Object.keys(results.quantities)).toHaveLength(mixed.length - 2);
			return;
		}
		expect.fail('No limit stopped a busy line.');
	}, 120_000);

	it('stops a child that takes too much memory, and answers although every try ends so', async () => {
		const pool = open({ residentMegabytes: 1 });
		const results = await pool.evaluate(calculation(mixed.join('\n')), defaultOptions);
		expect(results.quantities).toEqual({});
		expect(results.errors.map(({ code }) => code)).toEqual(['tooLarge', 'tooLarge', 'tooLarge']);
	}, 60_000);

	it('computes anew what a child had that was killed from outside, and blames no line for it', async () => {
		const pool = open();
		await pool.evaluate(calculation('x = 1'), defaultOptions);
		const answer = pool.evaluate(calculation(mixed.join('\n')), defaultOptions);
		let killed = 0;
		while (killed === 0) killed = await killEvaluators();
		const results = await answer;
		expect(results.quantities.a?.value).toBe(1);
		expect(results.errors).toEqual([]);
		expect((await pool.evaluate(calculation('x = 2'), defaultOptions)).quantities.x?.value).toBe(2);
	}, 60_000);

	it('is ready for the next note after it stopped one', async () => {
		const pool = open({ limitsMs: [20, 20_000] });
		await pool.evaluate(calculation(mixed.join('\n')), defaultOptions);
		// On a busy machine the short limit may stop even this note; the next try then finds another child ready.
		let value: number | null | undefined;
		for (let tries = 0; tries < 20 && value === undefined; tries++) {
			const { quantities } = await pool.evaluate(calculation('x = 1'), defaultOptions);
			value = quantities.x?.value;
		}
		expect(value).toBe(1);
	}, 60_000);

	it('draws trials, tells how far it is, and stops when it is told to', async () => {
		const pool = open();
		const cells = calculation('R1 = tolerance(1 kohm, 1 %)\nI1 = 5 V / R1');
		const monteCarlo = { quantities: ['I1'], trials: 1_000_000, seed: 1 };
		const drawn: number[] = [];
		const onProgress = (count: number) => drawn.push(count);
		const options = { ...defaultOptions, monteCarlo };
		const { quantities } = await pool.evaluate(cells, options, { onProgress });
		expect(quantities.I1?.monteCarlo?.trials).toBe(1_000_000);
		expect(drawn.length).toBeGreaterThan(3);
		expect(drawn).toEqual([...drawn].sort((a, b) => a - b));

		const control = new AbortController();
		const many = { ...defaultOptions, monteCarlo: { ...monteCarlo, trials: 10_000_000 } };
		const stopped = pool.evaluate(cells, many, {
			onProgress: () => control.abort(),
			signal: control.signal,
		});
		await expect(stopped).rejects.toThrow('This was stopped.');
		const next = await pool.evaluate(calculation('x = 1'), defaultOptions);
		expect(next.quantities.x?.value).toBe(1);
	}, 60_000);

	it('draws the same trials whether one thread draws them or two', async () => {
		const cells = calculation('R1 = tolerance(1 kohm, 1 %)\nI1 = normal(5 V, 1 mV) / R1');
		const monteCarlo = { quantities: ['I1', 'R1'], trials: 500_500, seed: 3 };
		const options = { ...defaultOptions, monteCarlo };
		const pool = open();
		// The second time its second thread is there from the beginning.
		for (let time = 0; time < 2; time++)
			expect(await pool.evaluate(cells, options)).toEqual(evaluate(cells, options));
	}, 60_000);

	it('answers edits of a note like a first evaluation of it, whatever became of the results before', async () => {
		const pool = open({ size: 2 });
		let last: Evaluation | undefined;
		let [kept, anew] = [0, 0];
		for (let edit = 0; edit < 20; edit++) {
			const source = `x = ${edit} V\n${edit % 3 ? 'w = 2\n' : ''}y = normal(x, 1 mV) / 2\nz = 3 A`;
			// Now and then the child is gone, or is asked something else of the note in between.
			if (edit % 7 === 6) await killEvaluators();
			if (edit % 4 === 3) await pool.evaluate(calculation('q = 1'), defaultOptions, { note: 'n' });
			const edited = await pool.evaluate(calculation(source), defaultOptions, { note: 'n', last });
			expect(edited).toEqual(await pool.evaluate(calculation(source), defaultOptions));
			if (last && edited.quantities.z === last.quantities.z) kept += 1;
			else anew += 1;
			last = edited;
		}
		expect(kept).toBeGreaterThan(5);
		expect(anew).toBeGreaterThan(1);
	}, 60_000);

	it('gives a formula none of its environment and no way to it', async () => {
		const results = await open().evaluate(
			calculation('process\nprocess.env\nrequire("fs")\nconstructor.constructor("return 1")()'),
			defaultOptions,
		);
		expect(results.errors).toHaveLength(4);
		expect(results.lines.every(({ readout }) => readout === undefined)).toBe(true);
	}, 30_000);

	it('says that it cannot compute where its children do not start', async () => {
		const pool = open({ entry: join(folder, 'missing.mjs') });
		await expect(pool.evaluate(calculation('x = 1'), defaultOptions)).rejects.toMatchObject({
			code: 'unavailable',
		});
	}, 60_000);

	it('refuses notes once it is closed', async () => {
		const pool = open();
		await pool.close();
		await expect(pool.evaluate(calculation('x = 1'), defaultOptions)).rejects.toBeInstanceOf(
			AppError,
		);
	}, 30_000);
});
