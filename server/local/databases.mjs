import { setTimeout as wait } from 'node:timers/promises';
import pg from 'pg';
import { databaseUrl } from './postgres.mjs';

/**
 * Makes an empty database in the clone's own cluster, or a copy of another one to which nobody may be connected.
 * @param {string} name
 * @param {string} [template]
 */
export async function createDatabase(name, template = 'template1') {
	await administer((client) =>
		client.query(`create database ${quoted(name)} template ${quoted(template)}`),
	);
}

/**
 * Removes a database if it exists; open connections are cut.
 * @param {string} name
 */
export async function dropDatabase(name) {
	await administer(async (client) => {
		for (let left = 50; ; left--) {
			try {
				await client.query(`drop database if exists ${quoted(name)} with (force)`);
				return;
			} catch (error) {
				// The database's own vacuum is at work in it, which only a superuser may end; it is done in a moment.
				const isVacuum = error instanceof pg.DatabaseError && error.code === '42501';
				if (!isVacuum || left === 0) throw error;
				await wait(100);
			}
		}
	});
}

/**
 * Names of the cluster's databases that begin so.
 * @param {string} prefix
 * @returns {Promise<string[]>}
 */
export function listDatabases(prefix) {
	return administer(async (client) => {
		/** @type {import('pg').QueryResult<{ datname: string }>} */
		const found = await client.query(
			'select datname from pg_database where starts_with(datname, $1)',
			[prefix],
		);
		return found.rows.map((row) => row.datname);
	});
}

/**
 * Gives a database another name.
 * @param {string} from
 * @param {string} to
 */
export async function renameDatabase(from, to) {
	await administer((client) =>
		client.query(`alter database ${quoted(from)} rename to ${quoted(to)}`),
	);
}

/**
 * @template T
 * @param {(client: import('pg').Client) => Promise<T>} work
 * @returns {Promise<T>}
 */
async function administer(work) {
	const client = new pg.Client({ connectionString: databaseUrl('postgres') });
	await client.connect();
	try {
		return await work(client);
	} finally {
		await client.end();
	}
}

/** @param {string} name */
function quoted(name) {
	return pg.escapeIdentifier(name);
}
