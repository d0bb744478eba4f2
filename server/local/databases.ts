import pg from 'pg';
import { databaseUrl } from './postgres.mjs';

/** Makes a database in the clone's own cluster unless it exists. Returns its address. */
export async function ensureDatabase(name: string): Promise<string> {
	await administer(async (client) => {
		const found = await client.query('select 1 from pg_database where datname = $1', [name]);
		if (found.rowCount === 0) await client.query(`create database ${quoted(name)}`);
	});
	return databaseUrl(name);
}

/** Makes a database as a copy of another one, to which nobody may be connected. Returns its address. */
export async function copyDatabase(name: string, template: string): Promise<string> {
	await administer((client) =>
		client.query(`create database ${quoted(name)} template ${quoted(template)}`),
	);
	return databaseUrl(name);
}

/** Removes a database; open connections are cut. */
export async function dropDatabase(name: string): Promise<void> {
	await administer((client) =>
		client.query(`drop database if exists ${quoted(name)} with (force)`),
	);
}

/** Names of the cluster's databases that begin so. */
export async function listDatabases(prefix: string): Promise<string[]> {
	return administer(async (client) => {
		const found = await client.query<{ datname: string }>(
			'select datname from pg_database where starts_with(datname, $1)',
			[prefix],
		);
		return found.rows.map((row) => row.datname);
	});
}

/** Gives a database another name. */
export async function renameDatabase(from: string, to: string): Promise<void> {
	await administer((client) =>
		client.query(`alter database ${quoted(from)} rename to ${quoted(to)}`),
	);
}

async function administer<T>(work: (client: pg.Client) => Promise<T>): Promise<T> {
	const client = new pg.Client({ connectionString: databaseUrl('postgres') });
	await client.connect();
	try {
		return await work(client);
	} finally {
		await client.end();
	}
}

function quoted(name: string): string {
	return pg.escapeIdentifier(name);
}
