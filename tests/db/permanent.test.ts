import { sql } from 'drizzle-orm';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { db } from '$lib/server/db/client';
import { closePool } from '$lib/server/evaluation/pool';
import { createDatabase, type TestDatabase } from '../support/database';
import { freeze, writeNote } from '../support/note-life';
import { makeCast } from '../support/people';

let database: TestDatabase;
beforeAll(async () => {
	database = await createDatabase();
	const cast = await makeCast();
	const { number } = await writeNote(cast.author);
	await freeze(cast, number);
});
afterAll(async () => {
	await closePool();
	await database.drop();
});

/** What the table holds, as one text. */
async function contents(table: string): Promise<unknown> {
	const { rows } = await db().execute(
		sql.raw(
			`select count(*)::int as count, md5(string_agg(t::text, '' order by t::text)) from ${table} t`,
		),
	);
	return rows[0];
}

/** The database's own sentence for why it refused. */
async function refusal(statement: string): Promise<string> {
	try {
		await db().execute(sql.raw(statement));
	} catch (error) {
		return ((error as Error).cause as Error).message;
	}
	return 'nothing was refused';
}

const columns = {
	candidate: 'digest',
	sign_off: 'person_name',
	revision: 'letter',
	audit_event: 'action',
	note_update: 'client_edit_id',
};

for (const [table, column] of Object.entries(columns)) {
	test(`the database itself refuses to change, remove or empty rows of ${table}`, async () => {
		const before = await contents(table);
		expect(before).not.toMatchObject({ count: 0 });
		const permanent = `rows of "${table}" are permanent`;
		expect(await refusal(`update ${table} set ${column} = 'Z'`)).toBe(
			`UPDATE is refused: ${permanent}`,
		);
		expect(await refusal(`delete from ${table}`)).toBe(`DELETE is refused: ${permanent}`);
		expect(await refusal(`truncate ${table} cascade`)).toContain('TRUNCATE is refused: rows of');
		expect(await refusal(`delete from ${table} where false`)).toBe(
			`DELETE is refused: ${permanent}`,
		);
		expect(await contents(table)).toEqual(before);
	});
}

test('no row that others depend on can be taken from under them', async () => {
	for (const statement of [
		'truncate note cascade',
		'truncate person cascade',
		'truncate team cascade',
	]) {
		expect(await refusal(statement)).toContain('are permanent');
	}
	expect(await refusal('delete from note')).toContain('violates foreign key constraint');
	expect(await refusal('delete from person')).toContain('violates foreign key constraint');
});
