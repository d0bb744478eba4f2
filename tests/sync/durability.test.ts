import { sql } from 'drizzle-orm';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { titleOf } from '$lib/note/document';
import { closeDb, db } from '$lib/server/db/client';
import { change } from '$lib/server/notes/updates';
import { firstFree } from '../../server/local/ports.mjs';
import { Cluster } from '../faults/cluster';
import { eventually, openPage, saved, storedContent, type } from '../support/page';
import { runEntry } from '../support/server';
import { startSyncBench, type SyncBench } from '../support/sync';

let bench: SyncBench;
beforeAll(async () => {
	bench = await startSyncBench();
});
afterAll(() => bench.close());

test('a process that takes edits does not start on a database that would lose them in a crash', async () => {
	const cluster = await Cluster.create(await firstFree(54_700));
	try {
		for (const setting of ['fsync', 'full_page_writes', 'synchronous_commit']) {
			await cluster.stop();
			await cluster.start([`${setting}=off`]);
			const { code, errors } = await runEntry({
				ROLES: 'sync',
				NODE_OPTIONS: '',
				DATABASE_URL: cluster.url(),
			});
			expect(code).toBe(1);
			expect(errors).toContain(`The database runs with ${setting} off.`);
			expect(errors).toContain('Turn the setting on again.');
		}
	} finally {
		await cluster.remove();
	}
});

/** Has every connection of the application made anew, as after a restart of the database. */
async function reconnect(): Promise<void> {
	await db().execute(sql`select pg_terminate_backend(pid) from pg_stat_activity
		where datname = current_database() and usename = current_user and pid <> pg_backend_pid()`);
	await closeDb();
}

test('a database that comes back without durability is given no edit, and everything once it has it again', async () => {
	const noteId = await bench.makeNote('');
	const page = await openPage(bench.server, { noteId, cookie: bench.cookie });
	const name = new URL(bench.databaseUrl).pathname.slice(1);
	await bench.asOwner(`alter database ${name} set synchronous_commit = off`);
	await reconnect();
	const by = bench.engineer.personId;
	await expect(change(noteId, by, (doc) => titleOf(doc).insert(0, 'Lost '))).rejects.toMatchObject({
		code: 'unavailable',
		message: expect.stringContaining('synchronous_commit off') as string,
	});
	type(page, page.cells[0]!.id, 'a = 1\n');
	await eventually(() => page.saving.count > 0);
	expect(await storedContent(noteId)).toMatchObject({ title: 'Divider', cells: [{ source: '' }] });
	expect(page.saving.state).not.toBe('saved');

	await bench.asOwner(`alter database ${name} reset synchronous_commit`);
	await reconnect();
	await saved(page);
	expect((await storedContent(noteId)).cells[0]!.source).toBe('a = 1\n');
	page.destroy();
});
