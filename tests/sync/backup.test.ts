import { execFileSync } from 'node:child_process';
import { join } from 'node:path';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { closeDb } from '$lib/server/db/client';
import * as notes from '$lib/server/notes/notes';
import * as databases from '../../server/local/databases.mjs';
import { findPrograms } from '../../server/local/postgres-programs.mjs';
import { createDatabase, type TestDatabase } from '../support/database';
import { contentOf, eventually, openPage, saved, storedContent, type } from '../support/page';
import { makeMember, makeTeam, signIn } from '../support/people';
import { startProxy } from '../support/proxy';
import { startSyncServer, syncUrl } from '../support/server';

const build = process.env.BUILD_FOLDER ?? 'build';

let database: TestDatabase;
beforeAll(async () => {
	database = await createDatabase();
});
afterAll(() => database.drop());

const program = (name: string, words: string[], input?: Buffer) =>
	execFileSync(join(findPrograms()!, name), words, { input, maxBuffer: 1 << 28, stdio: 'pipe' });

test('after a backup was restored, pages of before neither bring back what it lacks nor double what it holds', async () => {
	const engineer = await makeMember(await makeTeam(), 'engineer');
	const cookie = await signIn(engineer);
	const cells = [{ kind: 'calculation' as const, source: 'kept = 1 V\n' }];
	const noteId = (await notes.create(engineer, { title: 'Divider', cells })).id;
	const before = await startSyncServer();
	const proxy = await startProxy(before.port);
	const old = await openPage({ url: syncUrl(proxy.port) }, { noteId, cookie });
	const backup = program('pg_dump', ['--format=custom', database.ownerUrl]);
	type(old, old.cells[0]!.id, 'since = 2 V\n');
	await saved(old);

	proxy.cut();
	expect(await before.stop()).toBe(0);
	await eventually(() => old.connection === 'offline');
	type(old, old.cells[0]!.id, 'unsaved = 3 V\n');
	await closeDb();
	await databases.dropDatabase(database.name);
	await databases.createDatabase(database.name);
	program('pg_restore', ['--dbname', database.ownerUrl], backup);
	const said = execFileSync(process.execPath, [`${build}/restored.js`], { encoding: 'utf8' });
	expect(said).toContain('1 notes got a new epoch');

	const after = await startSyncServer();
	proxy.target = after.port;
	proxy.mend();
	await eventually(() => old.connection === 'closed');
	expect(old.notice).toContain('restored from a backup');
	const anew = await openPage({ url: syncUrl(proxy.port) }, { noteId, cookie });
	type(anew, anew.cells[0]!.id, 'new = 4 V\n');
	await saved(anew);
	expect(contentOf(anew).cells[0]!.source).toBe('kept = 1 V\nnew = 4 V\n');
	expect((await storedContent(noteId)).cells[0]!.source).toBe('kept = 1 V\nnew = 4 V\n');
	old.destroy();
	anew.destroy();
	await after.stop();
	await proxy.close();
});
