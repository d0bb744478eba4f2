import { sql } from 'drizzle-orm';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { createDatabase, type TestDatabase } from '../support/database';
import { db } from '$lib/server/db/client';

let database: TestDatabase;
beforeAll(async () => {
	database = await createDatabase();
});
afterAll(() => database.drop());

test('a test file has a migrated database of its own', async () => {
	const found = await db().execute(sql`select current_database() as name`);
	expect(found.rows).toEqual([{ name: database.name }]);
	const tables = await db().execute(
		sql`select 1 from information_schema.tables where table_name = 'note'`,
	);
	expect(tables.rowCount).toBe(1);
});

test('the application works as a role that is no superuser and owns neither its database nor a table', async () => {
	const found = await db().execute(sql`
		select rolsuper,
			pg_get_userbyid(datdba) = current_user
				or exists (select 1 from pg_tables where tableowner = current_user) as owner
		from pg_roles, pg_database where rolname = current_user and datname = current_database()`);
	expect(found.rows).toEqual([{ rolsuper: false, owner: false }]);
});

test('durability is on', async () => {
	const found = await db().execute(
		sql`select name, setting from pg_settings where name in ('fsync', 'full_page_writes', 'synchronous_commit') order by name`,
	);
	expect(found.rows.map((row) => row.setting)).toEqual(['on', 'on', 'on']);
});
