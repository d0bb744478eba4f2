import { sql } from 'drizzle-orm';
import pg from 'pg';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { db } from '$lib/server/db/client';
import { closePool } from '$lib/server/evaluation/pool';
import { withdraw } from '$lib/server/revisions/withdraw';
import { createDatabase, type TestDatabase } from '../support/database';
import { freeze, seen, writeNote } from '../support/note-life';
import { makeCast } from '../support/people';

let database: TestDatabase;
let owner: pg.Client;
beforeAll(async () => {
	database = await createDatabase();
	owner = new pg.Client({ connectionString: database.ownerUrl });
	await owner.connect();
	const cast = await makeCast();
	const { number } = await writeNote(cast.author);
	await freeze(cast, number);
	const { rows } = await owner.query<{ digest: string }>('select digest from revision');
	const { password } = await seen(cast.approver, number);
	const digest = rows[0]?.digest ?? '';
	await withdraw(cast.approver, number, 'A', { password, digest, reason: 'Wrong part.' });
});
afterAll(async () => {
	await closePool();
	await owner.end();
	await database.drop();
});

/** What the table holds, as one text. */
async function contents(table: string): Promise<unknown> {
	const { rows } = await owner.query(
		`select count(*)::int as count, md5(string_agg(t::text, '' order by t::text)) from ${table} t`,
	);
	return rows[0];
}

const sentence = (error: unknown) => (error as Error).message;

/** Why the database refused what the application's role asked. */
function refusal(statement: string): Promise<string> {
	return db()
		.execute(sql.raw(statement))
		.then(
			() => 'nothing was refused',
			(error: Error) => sentence(error.cause),
		);
}

/** The same for the role that owns the tables. */
function refusalOfOwner(statement: string): Promise<string> {
	return owner.query(statement).then(() => 'nothing was refused', sentence);
}

const columns = {
	candidate: 'digest',
	sign_off: 'person_name',
	revision: 'letter',
	withdrawal: 'reason',
	signed_entry: 'signature',
	checkpoint: 'note',
	audit_event: 'action',
	audit_link: 'hash',
};

for (const [table, column] of Object.entries(columns)) {
	test(`nobody changes, removes or empties rows of ${table}: not the application, not the owner`, async () => {
		const before = await contents(table);
		expect(before).not.toMatchObject({ count: 0 });
		const deeds = {
			UPDATE: `update ${table} set ${column} = 'Z'`,
			DELETE: `delete from ${table} where false`,
			TRUNCATE: `truncate ${table}`,
		};
		for (const [deed, statement] of Object.entries(deeds)) {
			expect(await refusal(statement)).toBe(`permission denied for table ${table}`);
			// A table that another one refers to is not emptied in any case.
			expect(await refusalOfOwner(statement)).toMatch(
				new RegExp(
					`^${deed} is refused: rows of "${table}" are permanent$|^cannot truncate a table`,
				),
			);
		}
		expect(await refusalOfOwner(`truncate ${table} cascade`)).toContain(
			'TRUNCATE is refused: rows of',
		);
		expect(await contents(table)).toEqual(before);
	});
}

test('the application adds no link to the chain of the audit trail and changes neither tables nor their guards', async () => {
	for (const statement of [
		"insert into audit_link values (999, 999, 'f')",
		'alter table revision disable trigger permanent',
		'drop trigger permanent on revision',
		'create or replace function signing_time() returns timestamptz language sql as $$ select now() $$',
		"set session_replication_role = 'replica'",
		'drop table revision',
	]) {
		expect(await refusal(statement), statement).toMatch(/permission denied|must be owner/);
	}
});

test('no row that others depend on can be taken from under them', async () => {
	for (const table of ['note', 'person', 'team']) {
		expect(await refusal(`truncate ${table} cascade`)).toContain('permission denied');
		expect(await refusalOfOwner(`truncate ${table} cascade`)).toContain('are permanent');
	}
	expect(await refusal('delete from note')).toContain('violates foreign key constraint');
	expect(await refusal('delete from person')).toContain('violates foreign key constraint');
});

test('an update that a person was told is saved is neither changed nor removed', async () => {
	const before = await contents('note_update');
	expect(await refusal("update note_update set client_edit_id = 'Z'")).toContain('refused');
	expect(await refusalOfOwner("update note_update set client_edit_id = 'Z'")).toContain('refused');
	expect(await contents('note_update')).toEqual(before);
});
