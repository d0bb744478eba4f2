import { must } from './commands.mjs';
import { settings } from './serving.mjs';

/** @typedef {{ email: string, password: string, role: string }} Account */

/**
 * Migrates a database and loads the demonstration into it unless it is there.
 * @param {string} database
 * @returns {Promise<Account[]>} who can sign in
 */
export async function fill(database) {
	const env = settings(database, 4173);
	await must(process.execPath, ['build/migrate.js'], { env });
	const output = await must(process.execPath, ['build/demonstration.js'], { env });
	const last = output.trimEnd().split('\n').at(-1) ?? '';
	return /** @type {{ accounts: Account[] }} */ (JSON.parse(last)).accounts;
}

/**
 * The same for a database that may not exist yet: a new one gets its name only when it is whole.
 * @param {string} database
 * @param {{ fresh: boolean }} options `fresh` throws away what is there
 */
export async function ensure(database, { fresh }) {
	const databases = await import('./databases.mjs');
	if (fresh) await databases.dropDatabase(database);
	const making = `${database}_making`;
	await databases.dropDatabase(making);
	if ((await databases.listDatabases(database)).includes(database)) return fill(database);
	await databases.createDatabase(making);
	const accounts = await fill(making);
	await databases.renameDatabase(making, database);
	return accounts;
}
