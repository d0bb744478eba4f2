import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { db } from '$lib/server/db/client';
import { noteUpdate } from '$lib/server/db/schema/notes';
import * as notes from '$lib/server/notes/notes';
import { createDatabase, type TestDatabase } from '../support/database';
import { contentOf, eventually, openPage, saved, storedContent, type } from '../support/page';
import { makeMember, makeTeam, signIn } from '../support/people';
import { startSyncServer, type SyncServer } from '../support/server';
import type { Actor } from '$lib/server/auth/access';

let database: TestDatabase;
let server: SyncServer;
let engineer: Actor;
let cookie: string;

beforeAll(async () => {
	database = await createDatabase();
	engineer = await makeMember(await makeTeam(), 'engineer');
	cookie = await signIn(engineer);
	server = await startSyncServer();
});
afterAll(async () => {
	await server.stop();
	await database.drop();
});

async function makeNote() {
	const cells = [{ kind: 'calculation' as const, source: 'U = 5 V\n' }];
	return (await notes.create(engineer, { title: 'Divider', cells })).id;
}

test('what a page calls saved is in the database', async () => {
	const noteId = await makeNote();
	const page = await openPage(server, { noteId, cookie });
	type(page, page.cells[0]!.id, 'R = 2 kohm\n');
	expect(page.saving).toMatchObject({ state: 'saving', count: 1 });
	await saved(page);
	expect(await storedContent(noteId)).toEqual(contentOf(page));
	expect(contentOf(page).cells[0]!.source).toBe('U = 5 V\nR = 2 kohm\n');
	const rows = await db().select().from(noteUpdate).where(eq(noteUpdate.noteId, noteId));
	expect(rows.map((row) => [row.seq, row.personId])).toEqual([
		[1, engineer.personId],
		[2, engineer.personId],
	]);
	await eventually(() => page.evaluation.quantities.R !== undefined);
	page.destroy();
});
