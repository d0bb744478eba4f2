import { renameSync, rmSync } from 'node:fs';
import { must } from './commands.mjs';
import { migrationSettings } from './migration-settings.mjs';
import { checkpointFolder, settings } from './serving.mjs';

/**
 * @typedef {{ email: string, password: string, role: string }} Account
 * @typedef {{ accounts: Account[], token: string }} Demonstration who can sign in, and the engineer's token for scripts
 */

/**
 * Migrates a database and loads the demonstration into it unless it is there.
 * @param {string} database
 * @param {string} [earlierToken] kept where it still counts
 * @returns {Promise<Demonstration>}
 */
export async function fill(database, earlierToken = '') {
	const env = { ...settings(database, 4173), EARLIER_TOKEN: earlierToken };
	await must(process.execPath, ['build/migrate.js'], { env: migrationSettings(database) });
	const output = await must(process.execPath, ['build/demonstration.js'], { env });
	const last = output.trimEnd().split('\n').at(-1) ?? '';
	return /** @type {Demonstration} */ (JSON.parse(last));
}

/**
 * The same for a database that may not exist yet: a new one gets its name only when it is whole.
 * @param {string} database
 * @param {{ fresh: boolean, earlierToken?: string }} options `fresh` throws away what is there
 */
export async function ensure(database, { fresh, earlierToken }) {
	const databases = await import('./databases.mjs');
	if (fresh) await databases.dropDatabase(database);
	const making = `${database}_making`;
	await databases.dropDatabase(making);
	const there = (await databases.listDatabases(database)).includes(database);
	if (there) return fill(database, earlierToken);
	await databases.createDatabase(making);
	// Checkpoints of a database that is gone would call the new one's record cut short.
	for (const name of [making, database])
		rmSync(checkpointFolder(name), { recursive: true, force: true });
	const demonstration = await fill(making);
	await databases.renameDatabase(making, database);
	renameSync(checkpointFolder(making), checkpointFolder(database));
	return demonstration;
}
