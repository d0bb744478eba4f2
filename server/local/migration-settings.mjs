import { applicationRole, databaseUrl } from './postgres.mjs';

/**
 * What the program that migrates gets: the owner's address, and the role that gets the application's rights.
 * @param {string} database
 * @returns {Record<string, string>}
 */
export function migrationSettings(database) {
	const { PATH = '/usr/bin:/bin', HOME = '/' } = process.env;
	return { PATH, HOME, DATABASE_URL: databaseUrl(database), APPLICATION_ROLE: applicationRole };
}
