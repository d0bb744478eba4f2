import { AppError } from '$lib/errors';
import { appendAll, type Edit } from '$lib/server/notes/append';
import * as notes from '$lib/server/notes/notes';
import { loadDocument } from '$lib/server/notes/updates';
import { titleOf } from '$lib/note/document';
import { clientsIn } from '$lib/note/touched';
import * as Y from 'yjs';
import pg from 'pg';
import { afterAll, beforeAll, expect, test } from 'vitest';
import type { Actor } from '$lib/server/auth/access';
import { createDatabase, type TestDatabase } from '../support/database';
import { makeMember, makeTeam } from '../support/people';

let database: TestDatabase;
let [one, other] = [] as unknown as [Actor, Actor];

beforeAll(async () => {
	database = await createDatabase();
	const team = await makeTeam();
	one = await makeMember(team, 'engineer');
	other = await makeMember(team, 'engineer');
});
afterAll(() => database.drop());

async function makeNote(): Promise<string> {
	return (await notes.create(one, { title: 'Title' })).id;
}

/** An edit that puts a word before the title, from a client of its own or a given one. */
async function edit(noteId: string, id: string, actor: Actor, client?: number): Promise<Edit> {
	const { doc } = await loadDocument(noteId);
	if (client !== undefined) doc.clientID = client;
	const before = Y.encodeStateVector(doc);
	titleOf(doc).insert(0, `${id} `);
	const bytes = Y.encodeStateAsUpdate(doc, before);
	return { id, personId: actor.personId, bytes, clients: clientsIn(bytes), cells: [] };
}

const titleIn = async (noteId: string) => titleOf((await loadDocument(noteId)).doc).toJSON();

test('edits of several notes are stored together, each note with numbers of its own', async () => {
	const [a, b] = [await makeNote(), await makeNote()];
	const outcomes = await appendAll([
		{ noteId: a, edits: [await edit(a, 'first', one), await edit(a, 'second', other)] },
		{ noteId: b, edits: [await edit(b, 'third', one)] },
	]);
	expect(outcomes.get(a)).toMatchObject({ first: 2, seq: 3 });
	expect(outcomes.get(b)).toMatchObject({ first: 2, seq: 2 });
	expect(await titleIn(a)).toMatch(/first .*Title|second .*Title/);
	expect(await titleIn(b)).toBe('third Title');
});

test('an edit that comes again is stored once, also twice in one call', async () => {
	const noteId = await makeNote();
	const again = await edit(noteId, 'again', one);
	await appendAll([{ noteId, edits: [again, again] }]);
	const repeated = (await appendAll([{ noteId, edits: [again] }])).get(noteId);
	expect(repeated).toMatchObject({ first: undefined, seq: 2 });
	expect(await titleIn(noteId)).toBe('again Title');
});

test('a note whose edits are under a foreign client id stores none of them, and keeps no other note out', async () => {
	const [a, b] = [await makeNote(), await makeNote()];
	await appendAll([{ noteId: a, edits: [await edit(a, 'mine', one, 4711)] }]);
	const outcomes = await appendAll([
		{ noteId: a, edits: [await edit(a, 'good', other), await edit(a, 'foreign', other, 4711)] },
		{ noteId: b, edits: [await edit(b, 'good', other)] },
	]);
	const refused = outcomes.get(a);
	expect(refused).toBeInstanceOf(AppError);
	expect(refused).toMatchObject({ code: 'conflict', details: { ids: ['foreign'] } });
	expect(await titleIn(a)).toBe('mine Title');
	expect(await titleIn(b)).toBe('good Title');
});

test('a note that somebody has locked, or that is gone, has no outcome and holds nobody up', async () => {
	const [locked, free] = [await makeNote(), await makeNote()];
	const client = new pg.Client({ connectionString: database.url });
	await client.connect();
	await client.query('begin');
	await client.query('select 1 from note where id = $1 for update', [locked]);
	const gone = crypto.randomUUID();
	const outcomes = await appendAll([
		{ noteId: locked, edits: [await edit(locked, 'late', one)] },
		{ noteId: free, edits: [await edit(free, 'soon', one)] },
		{ noteId: gone, edits: [] },
	]);
	await client.query('rollback');
	await client.end();
	expect([...outcomes.keys()]).toEqual([free]);
	expect(await titleIn(locked)).toBe('Title');
	expect(await titleIn(free)).toBe('soon Title');
});
