import { drizzle } from 'drizzle-orm/node-postgres';
import { migrate } from 'drizzle-orm/node-postgres/migrator';
import pg from 'pg';

/** Brings a database to the newest schema, from the migrations in `drizzle/` under the working folder. */
export async function applyMigrations(url: string): Promise<void> {
	const client = new pg.Client({ connectionString: url, connectionTimeoutMillis: 5000 });
	await client.connect();
	try {
		await migrate(drizzle(client), { migrationsFolder: 'drizzle' });
	} finally {
		await client.end();
	}
}
