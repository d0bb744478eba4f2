import { start } from '../../server/local/postgres.mjs';
import { sweepDatabases } from './database';

/** Vitest's global set-up of the database and sync tests: PostgreSQL runs, and stays running for the next run. */
export async function setup(): Promise<void> {
	await start();
	await sweepDatabases();
}
