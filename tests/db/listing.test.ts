import { afterAll, beforeAll, expect, test } from 'vitest';
import { listQuery } from '$lib/schemas/notes';
import { current } from '$lib/server/evaluation/store';
import { closePool } from '$lib/server/evaluation/pool';
import * as listing from '$lib/server/notes/listing';
import { createDatabase, type TestDatabase } from '../support/database';
import { check, edit, freeze, propose, writeNote } from '../support/note-life';
import { makeCast, type Cast } from '../support/people';

let database: TestDatabase;
let cast: Cast;
beforeAll(async () => {
	database = await createDatabase();
	cast = await makeCast();
	const draft = await writeNote(cast.author, 'Zener clamp', [
		{ kind: 'calculation', source: 'V_z = 5.1 V  # at 100% load\nI_z = V_z / R_lost' },
		{ kind: 'requirement', source: 'V_z <= 5 V\nV_z >= 4 V' },
	]);
	await current(draft.id);
	const frozen = await writeNote(cast.author, 'Anti-alias filter');
	await freeze(cast, frozen.number);
	const changed = await writeNote(cast.author, 'Bridge excitation');
	await freeze(cast, changed.number);
	await edit(cast.engineer, changed.id, 1, '\nR_secret = 5 ohm');
	await edit(cast.engineer, changed.id, 2, '\nV_out <= 1 V');
	await current(changed.id);
	const checked = await writeNote(cast.author, 'Current loop');
	await propose(cast.author, checked.number);
	await check(cast, checked.number);
});
afterAll(async () => {
	await closePool();
	await database.drop();
});

const list = (who: Cast[keyof Cast], query: Record<string, string> = {}) =>
	listing.list(who, listQuery.parse(query));
const titles = async (query: Record<string, string>, who = cast.author) =>
	(await list(who, query)).map((row) => row.title);

test('a row says where its note stands', async () => {
	const rows = await list(cast.author, { sort: 'number', order: 'asc' });
	expect(rows).toMatchObject([
		{
			number: 'MN-001',
			title: 'Zener clamp',
			state: 'draft',
			revision: null,
			nextLetter: 'A',
			requirements: { met: 1, notMet: 1, undecided: 0 },
			faults: 1,
			changedBy: 'Author Example',
		},
		{ number: 'MN-002', state: 'frozen', revision: 'A', nextLetter: 'B', faults: 0 },
		{
			number: 'MN-003',
			state: 'draft',
			revision: 'A',
			nextLetter: 'B',
			requirements: { met: 1, notMet: 1, undecided: 0 },
			changedBy: 'Engineer Example',
		},
		{ number: 'MN-004', state: 'checked', revision: null, nextLetter: 'A' },
	]);
});

test('the server sorts by each column, both ways', async () => {
	const orders = {
		number: ['Zener clamp', 'Anti-alias filter', 'Bridge excitation', 'Current loop'],
		title: ['Anti-alias filter', 'Bridge excitation', 'Current loop', 'Zener clamp'],
		changed: ['Zener clamp', 'Anti-alias filter', 'Bridge excitation', 'Current loop'],
	};
	for (const [sort, order] of Object.entries(orders)) {
		expect(await titles({ sort, order: 'asc' }), sort).toEqual(order);
		expect(await titles({ sort, order: 'desc' }), sort).toEqual([...order].reverse());
	}
	const states = await list(cast.author, { sort: 'state', order: 'asc' });
	expect(states.map((row) => row.state)).toEqual(['draft', 'draft', 'checked', 'frozen']);
	const worst = await list(cast.author, { sort: 'requirements', order: 'desc' });
	expect(worst.map((row) => row.requirements.notMet)).toEqual([1, 1, 0, 0]);
	const letters = await list(cast.author, { sort: 'revision', order: 'desc' });
	expect(letters.map((row) => row.revision)).toEqual(['A', 'A', null, null]);
});

test('the server filters by state and by requirements that are not met', async () => {
	const by = { sort: 'number', order: 'asc' };
	expect(await titles({ ...by, state: 'draft' })).toEqual(['Zener clamp', 'Bridge excitation']);
	expect(await titles({ ...by, state: 'frozen' })).toEqual(['Anti-alias filter']);
	expect(await titles({ ...by, state: 'checked' })).toEqual(['Current loop']);
	expect(await titles({ ...by, state: 'in check' })).toEqual([]);
	expect(await titles({ ...by, state: 'not met' })).toEqual(['Zener clamp', 'Bridge excitation']);
});

test('the server searches numbers, titles and what the cells say, by every word', async () => {
	expect(await titles({ q: 'mn-003' })).toEqual(['Bridge excitation']);
	expect(await titles({ q: 'ZENER' })).toEqual(['Zener clamp']);
	expect(await titles({ q: 'r_secret' })).toEqual(['Bridge excitation']);
	expect(await titles({ q: 'V_in bridge' })).toEqual(['Bridge excitation']);
	expect(await titles({ q: 'V_in zener' })).toEqual([]);
});

test('signs that mean something to the database are searched for as they are', async () => {
	expect(await titles({ q: '100%' })).toEqual(['Zener clamp']);
	expect(await titles({ q: 'VXin' })).toEqual([]);
	expect(await titles({ q: 'V_in', sort: 'number', order: 'asc' })).toHaveLength(3);
	for (const q of ["'", '"', '\\', '_%', "'; drop table note; --"]) {
		expect(await titles({ q })).toEqual([]);
	}
	expect(await titles({})).toHaveLength(4);
});

test('a query that makes no sense is read as none', () => {
	expect(listQuery.parse({ sort: 'drop', order: 'x', state: '1', q: undefined })).toEqual({
		q: '',
		state: 'all',
		sort: 'changed',
		order: 'desc',
	});
});

test('readers see frozen notes only, with the figures that were frozen', async () => {
	const rows = await list(cast.reader, { sort: 'number', order: 'asc' });
	expect(rows).toMatchObject([
		{ number: 'MN-002', state: 'frozen', revision: 'A', requirements: { met: 1, notMet: 0 } },
		{
			number: 'MN-003',
			state: 'frozen',
			revision: 'A',
			requirements: { met: 1, notMet: 0 },
			changedBy: 'Approver Example',
		},
	]);
	expect(await titles({ q: 'R_secret' }, cast.reader)).toEqual([]);
	expect(await titles({ state: 'not met' }, cast.reader)).toEqual([]);
});

test('nobody sees the notes of another team', async () => {
	const other = await makeCast('Other Bench');
	for (const who of Object.values(other)) expect(await list(who)).toEqual([]);
});
