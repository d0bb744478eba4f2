import { afterAll, beforeAll, expect, test } from 'vitest';
import { AppError } from '$lib/errors';
import { closePool } from '$lib/server/evaluation/pool';
import * as quantities from '$lib/server/quantities/quantities';
import * as trials from '$lib/server/quantities/trials';
import { createDatabase, type TestDatabase } from '../support/database';
import { edit, writeNote } from '../support/note-life';
import { makeCast, type Cast } from '../support/people';

let database: TestDatabase;
let cast: Cast;
let number: string;
let id: string;
beforeAll(async () => {
	database = await createDatabase();
	cast = await makeCast();
	const source = [
		'V_in = normal(10 V, 20 mV) # from the bench supply',
		'R_1 = tolerance(30 kohm, 1 %)',
		'R_2 = tolerance(10 kohm, 1 %)',
		'V_out = V_in * R_2 / (R_1 + R_2)',
		'n = 12',
	].join('\n');
	({ id, number } = await writeNote(cast.author, 'Divider in doubt', [
		{ kind: 'calculation', source },
	]));
});
afterAll(async () => {
	await closePool();
	await database.drop();
});

const calm = () => ({ onProgress: () => undefined, signal: new AbortController().signal });
const codeOf = (promise: Promise<unknown>) =>
	promise.then(
		() => 'no error',
		(error: unknown) => (error instanceof AppError ? error.code : String(error)),
	);

test('a quantity comes with its formula, budget and worst case, all of one sequence number', async () => {
	const { seq, quantity, formula } = await quantities.get(cast.engineer, number, 'V_out');
	expect(seq).toBe(1);
	expect(quantity.budget?.map(({ input }) => input).sort()).toEqual(['R_1', 'R_2', 'V_in']);
	expect(quantity.worstCase?.exact).toBe(true);
	expect(quantity.texts?.standardUncertainty).toMatch(/mV$/);
	expect(formula?.symbols).toContain('<mfrac>');
	expect(formula?.figures).toContain('30.00');
	expect(quantity).not.toHaveProperty('formula');
});

test('names that no line defines are not found, whatever they mean to JavaScript', async () => {
	for (const name of ['V_nowhere', 'constructor', '__proto__', 'V_out; V_in'])
		expect(await codeOf(quantities.get(cast.engineer, number, name))).toBe('notFound');
	const wish = { quantity: 'toString', adaptive: false };
	expect(await codeOf(trials.prepare(cast.engineer, number, wish))).toBe('notFound');
});

test('trials of an exact quantity are refused', async () => {
	const wish = { quantity: 'n', adaptive: false };
	expect(await codeOf(trials.prepare(cast.engineer, number, wish))).toBe('invalid');
});

test('trials tell how far they are, and whoever draws them gets the same', async () => {
	const wish = { quantity: 'V_out', adaptive: false };
	const steps: [number, number][] = [];
	const draw = await trials.prepare(cast.engineer, number, wish);
	const first = await draw({ ...calm(), onProgress: (...step) => steps.push(step) });
	expect(first.monteCarlo.trials).toBe(1_000_000);
	expect(steps.length).toBeGreaterThan(3);
	expect(steps.every(([drawn, total]) => drawn <= total)).toBe(true);
	const second = await (await trials.prepare(cast.author, number, wish))(calm());
	expect(second.monteCarlo).toEqual(first.monteCarlo);
	expect(second.monteCarlo.seed).toBe(parseInt(id.slice(0, 8), 16));
});

test('one person draws one run at a time, and a stopped run makes room for the next', async () => {
	const wish = { quantity: 'V_out', adaptive: false };
	const draw = await trials.prepare(cast.approver, number, wish);
	const stop = new AbortController();
	let begun = (): void => undefined;
	const beginning = new Promise<void>((resolve) => (begun = resolve));
	const run = draw({ onProgress: () => begun(), signal: stop.signal });
	const ended = codeOf(run);
	await beginning;
	expect(await codeOf(trials.prepare(cast.approver, number, wish))).toBe('tooMany');
	stop.abort();
	const next = await trials.prepare(cast.approver, number, { ...wish, adaptive: true });
	expect(await ended).toBe('unavailable');
	const { monteCarlo } = await next(calm());
	expect(monteCarlo.stable).toBe(true);
});

test('after an edit the answer is that of the note as it is then', async () => {
	const before = await quantities.get(cast.engineer, number, 'V_out');
	await edit(cast.author, id, 0, '\nV_half = V_out / 2');
	const after = await quantities.get(cast.engineer, number, 'V_half');
	expect(after.seq).toBeGreaterThan(before.seq);
	expect(after.quantity.value).toBeCloseTo((before.quantity.value ?? NaN) / 2, 12);
});
