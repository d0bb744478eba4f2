import { drizzle } from 'drizzle-orm/node-postgres';
import { migrate } from 'drizzle-orm/node-postgres/migrator';
import pg from 'pg';
import { makeQueues, queueSchema } from '../jobs/queues';

/** Tables whose rows nobody changes or removes. The audit trail's links are added by the database itself. */
const permanent = [
	'candidate',
	'sign_off',
	'revision',
	'withdrawal',
	'audit_event',
	'signed_entry',
	'checkpoint',
];

/**
 * Brings a database to the newest schema, from the migrations in `drizzle/` under the working folder, and gives the
 * application's role its rights where one is named.
 */
export async function applyMigrations(url: string, applicationRole?: string): Promise<void> {
	const client = new pg.Client({ connectionString: url, connectionTimeoutMillis: 5000 });
	await client.connect();
	try {
		await migrate(drizzle(client), { migrationsFolder: 'drizzle' });
		await makeQueues(url);
		if (applicationRole) await grant(client, applicationRole);
	} finally {
		await client.end();
	}
}

/** Rights to read and write, but to change nothing that is signed, frozen or witnessed, and no table's shape. */
async function grant(client: pg.Client, applicationRole: string): Promise<void> {
	const role = pg.escapeIdentifier(applicationRole);
	const kept = permanent.map((table) => pg.escapeIdentifier(table)).join(', ');
	await client.query(`
		GRANT USAGE ON SCHEMA public, ${queueSchema} TO ${role};
		GRANT SELECT, INSERT, UPDATE, DELETE ON ALL TABLES IN SCHEMA public, ${queueSchema} TO ${role};
		GRANT USAGE ON ALL SEQUENCES IN SCHEMA public TO ${role};
		REVOKE UPDATE, DELETE ON ${kept} FROM ${role};
		REVOKE INSERT, UPDATE, DELETE ON audit_link FROM ${role};`);
}
