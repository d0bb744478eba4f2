import { afterAll, beforeAll, expect, test } from 'vitest';
import { closePool } from '$lib/server/evaluation/pool';
import { current } from '$lib/server/evaluation/store';
import * as history from '$lib/server/notes/history';
import { ofRevision } from '$lib/server/revisions/reproduction';
import * as revisions from '$lib/server/revisions/revisions';
import { createDatabase, type TestDatabase } from '../support/database';
import { edit, freeze, writeNote } from '../support/note-life';
import { makeCast, signIn, type Cast } from '../support/people';
import { startSyncServer, type SyncServer } from '../support/server';
import { Visitor } from '../support/visitor';

let database: TestDatabase;
let server: SyncServer;
let cast: Cast;
let note: { id: string; number: string };

beforeAll(async () => {
	database = await createDatabase();
	server = await startSyncServer({ ROLES: 'web' });
	cast = await makeCast();
	note = await writeNote(cast.author, 'Divider', [
		{ kind: 'text', source: '## Purpose\n\nThe divider gives {{V_out}}.' },
		{
			kind: 'calculation',
			source: 'V_in = 10 V\nR_1 = tolerance(3 kohm, 1 %)\nV_out = V_in * 1 kohm / (R_1 + 1 kohm)',
		},
		{ kind: 'requirement', source: 'V_out <= 3 V' },
		{ kind: 'curve', source: 'V_out over V_in from 0 V to 20 V in 21 points' },
	]);
	await freeze(cast, note.number);
});
afterAll(async () => {
	await server.stop();
	await closePool();
	await database.drop();
});

test('a frozen revision keeps what a curve shows, and gives it again', async () => {
	const { results, content } = await revisions.get(cast.reader, note.number, 'A');
	expect(content.cells[3]).toMatchObject({ kind: 'curve' });
	const [sweep] = results.sweeps ?? [];
	expect(sweep).toMatchObject({ over: { name: 'V_in', present: 10 }, unit: 'V' });
	expect(sweep?.series[0]?.values.at(-1)).toBeCloseTo(5, 12);
	expect(sweep?.limits[0]?.stretches.map(({ verdict }) => verdict)).toEqual([
		'met',
		'undecided',
		'not met',
	]);
	const again = await ofRevision(cast.reader, note.number, 'A');
	expect(again.differences).toEqual([]);
	// Three quantities, the requirement, the curve.
	expect(again.figures).toBe(5);
});

test('its page holds the picture, its words and its points without a script', async () => {
	const reader = new Visitor(server.port, await signIn(cast.reader));
	const { status, body } = await reader.get(`/notes/${note.number}/revisions/A`);
	expect(status).toBe(200);
	expect(body).not.toMatch(/<script/);
	const [picture = ''] = /<figure[^>]*data-sweep="V_out"[^]*<\/figure>/.exec(body) ?? [];
	expect(picture).toMatch(
		/<svg[^>]*role="img"[^>]*aria-label="V_out over V_in from 0.V to 20.V\. V_out: Met from 0.V to 11\./,
	);
	expect(picture).toContain('upper limit 3');
	expect(picture).toContain('21 points as a table');
	expect(picture).not.toContain('role="slider"');
	const csv = decodeURIComponent(
		/href="data:text\/csv;charset=utf-8,([^"]*)"/.exec(picture)?.[1] ?? '',
	);
	expect(csv.split('\r\n')).toHaveLength(23);
	expect(csv).toContain('"V_in (V)","V_out (V)"');
});

test('the working copy goes on: its curve follows an edit, the frozen one stays, and the past shows its own', async () => {
	const before = (await current(note.id)).seq;
	await edit(cast.author, note.id, 3, ' logarithmic');
	const wrong = (await current(note.id)).results;
	expect(wrong.sweeps).toBeUndefined();
	expect(wrong.errors[0]).toMatchObject({ message: 'Logarithmic steps begin above zero.' });
	const past = await history.at(cast.author, note.number, before);
	expect(past.results.sweeps).toHaveLength(1);
	expect((await revisions.get(cast.reader, note.number, 'A')).results.sweeps).toHaveLength(1);
});

test('a note without a curve has no word of one in what is sealed', async () => {
	const plain = await writeNote(cast.author, 'Plain');
	await freeze(cast, plain.number);
	expect(JSON.stringify(await revisions.get(cast.reader, plain.number, 'A'))).not.toContain(
		'sweeps',
	);
});
