import { afterAll, beforeAll, expect, test } from 'vitest';
import * as threads from '$lib/server/comments/threads';
import * as comparison from '$lib/server/comparison/comparison';
import { closePool } from '$lib/server/evaluation/pool';
import * as candidates from '$lib/server/revisions/candidates';
import { createDatabase, type TestDatabase } from '../support/database';
import { edit, freeze, propose, seen, writeNote } from '../support/note-life';
import { makeCast, type Cast } from '../support/people';

let database: TestDatabase;
let cast: Cast;
let others: Cast;
/** Frozen as A, returned once, frozen as B, then edited. */
let number: string;

const cells = [
	{ kind: 'calculation' as const, source: 'V_in = tolerance(4 V, 1 %)\nV_out = V_in / 2' },
	{ kind: 'requirement' as const, source: 'V_out <= 2.5 V' },
	{ kind: 'text' as const, source: 'It gives {{V_out}}.' },
];
const keys = async (who: Cast[keyof Cast]) =>
	(await comparison.sides(who, number)).map(({ key, standing }) => `${key} ${standing}`);

beforeAll(async () => {
	database = await createDatabase();
	cast = await makeCast();
	others = await makeCast('Other Bench');
	const { id, number: made } = await writeNote(cast.author, 'Divider', cells);
	number = made;
	await freeze(cast, number);
	const thread = await threads.open(cast.engineer, number, {
		cellId: 'abc',
		kind: 'question',
		blocking: false,
		body: 'Is this the loaded value?',
	});
	await edit(cast.author, id, 0, '\nV_more = 3 V');
	await propose(cast.author, number);
	const returned = { ...(await seen(cast.engineer, number)), reason: 'Once more.' };
	await candidates.sendBack(cast.engineer, number, returned);
	await threads.setClosed(cast.author, number, thread.id, true);
	await edit(cast.author, id, 0, ' + 1 V');
	await freeze(cast, number);
	await threads.reply(cast.engineer, number, thread.id, { body: 'Said after B was frozen.' });
	await edit(cast.author, id, 1, '\nV_out >= 3 V');
});
afterAll(async () => {
	await closePool();
	await database.drop();
});

test('whoever may see the working copy compares all there is, readers what is frozen', async () => {
	expect(await keys(cast.engineer)).toEqual([
		'A superseded',
		'candidate-2 returned',
		'B valid',
		'working-copy as it is now',
	]);
	expect(await keys(cast.reader)).toEqual(['A superseded', 'B valid']);
	await expect(comparison.sides(others.approver, number)).rejects.toMatchObject({
		code: 'notFound',
	});
});

test('a reader who asks for what is not frozen is told that there is no such thing', async () => {
	for (const to of ['candidate-2', 'working-copy', 'D']) {
		await expect(comparison.compare(cast.reader, number, { from: 'A', to })).rejects.toMatchObject({
			code: 'notFound',
		});
	}
	const outside = comparison.compare(others.approver, number, { from: 'A', to: 'B' });
	await expect(outside).rejects.toMatchObject({ code: 'notFound' });
});

test('where nothing is asked for, the newest stands against what came before it', async () => {
	const sidesOf = async (who: Cast[keyof Cast], to?: string) => {
		const found = await comparison.compare(who, number, { to });
		return found && `${found.from.key} ${found.to.key}`;
	};
	expect(await sidesOf(cast.engineer)).toBe('B working-copy');
	expect(await sidesOf(cast.engineer, 'candidate-2')).toBe('A candidate-2');
	expect(await sidesOf(cast.engineer, 'B')).toBe('A B');
	expect(await sidesOf(cast.reader)).toBe('A B');
	expect(await sidesOf(cast.reader, 'A')).toBeNull();
});

test('a returned candidate is compared with the one that followed it', async () => {
	const found = await comparison.compare(cast.engineer, number, { from: 'candidate-2', to: 'B' });
	expect(found?.inputs).toMatchObject([
		{ name: 'V_more', value: { difference: { value: 1, unit: 'V' } } },
	]);
	expect(found?.results).toEqual([]);
});

test('revisions tell of the comments that they keep, not of what was said later', async () => {
	for (const who of [cast.reader, cast.engineer]) {
		const found = await comparison.compare(who, number, { from: 'A', to: 'B' });
		expect(found?.comments.opened).toHaveLength(1);
		expect(found?.comments.closed).toMatchObject([
			{ closed: { by: 'Author Example' }, comments: [{ body: 'Is this the loaded value?' }] },
		]);
		expect(JSON.stringify(found)).not.toContain('Said after B');
	}
});

test('the working copy is compared as it is now, with the budgets that the revision keeps', async () => {
	const found = await comparison.compare(cast.engineer, number, { from: 'B', to: 'working-copy' });
	expect(found?.requirements).toMatchObject([
		{ from: null, to: { requirement: 'V_out >= 3 V', verdict: 'not met' }, turned: true },
	]);
	expect([found?.budgets, found?.inputs, found?.results]).toEqual([[], [], []]);
	const back = await comparison.compare(cast.engineer, number, { from: 'working-copy', to: 'B' });
	expect(back?.requirements).toMatchObject([{ from: { verdict: 'not met' }, to: null }]);
});

test('a side compared with itself says nothing', async () => {
	for (const { key } of await comparison.sides(cast.engineer, number)) {
		const found = await comparison.compare(cast.engineer, number, { from: key, to: key });
		const { inputs, results, formulas, renamed, budgets, requirements, cells, texts } = found!;
		expect(
			[inputs, results, formulas, renamed, budgets, requirements, cells, texts].flat(),
		).toEqual([]);
		expect(found?.comments.opened).toEqual([]);
	}
});
