import { createHash, randomBytes } from 'node:crypto';
import { readdirSync, readFileSync } from 'node:fs';
import * as databases from '../../server/local/databases.mjs';
import { alone } from '../../server/local/lock.mjs';
import { applyMigrations } from '../../server/local/migrations';
import {
	applicationRole,
	applicationUrl,
	databaseUrl,
	start,
} from '../../server/local/postgres.mjs';
import { isAlive } from '../../server/local/processes.mjs';
import { signingKeyFile } from '../../server/local/secret.mjs';

export interface TestDatabase {
	name: string;
	/** For the application's role. */
	url: string;
	/** For the role that owns the tables, which may do what the application must not. */
	ownerUrl: string;
	/** Closes this process's pool and removes the database. */
	drop(): Promise<void>;
}

/**
 * A fresh, migrated database of a test file's own, and the settings of `env()` that point to it.
 * Call it before anything asks for `env()` or `db()`.
 */
export async function createDatabase(): Promise<TestDatabase> {
	await start();
	const template = await ensureTemplate();
	const name = `test_${process.pid}_${randomBytes(6).toString('hex')}`;
	await databases.createDatabase(name, template);
	const url = applicationUrl(name);
	Object.assign(process.env, testSettings(url));
	return {
		name,
		url,
		ownerUrl: databaseUrl(name),
		drop: async () => {
			const { closeDb } = await import('$lib/server/db/client');
			await closeDb();
			await databases.dropDatabase(name);
		},
	};
}

/** Removes what test runs left that ended without their `drop()`. */
export async function sweepDatabases(): Promise<void> {
	for (const name of await databases.listDatabases('test_')) {
		if (!isAlive(Number(name.split('_')[1]))) await databases.dropDatabase(name);
	}
}

function testSettings(url: string): Record<string, string> {
	return {
		DATABASE_URL: url,
		ORIGIN: 'http://localhost:4173',
		AUTH_SECRET: 'a secret of the tests, never used to serve',
		SIGNING_KEY_FILE: signingKeyFile(),
		EVALUATORS: '1',
		EVALUATOR_ENTRY: 'build/evaluator.js',
		LOG_LEVEL: process.env.LOG_LEVEL ?? 'silent',
	};
}

/** A migrated database per state of the migrations, copied for each test file instead of migrating each anew. */
async function ensureTemplate(): Promise<string> {
	const name = `template_${digestOfMigrations()}`;
	await alone('template', async () => {
		if ((await databases.listDatabases(name)).includes(name)) return;
		const making = `${name}_making`;
		await databases.dropDatabase(making);
		await databases.createDatabase(making);
		await applyMigrations(databaseUrl(making), applicationRole);
		await databases.renameDatabase(making, name);
	});
	return name;
}

function digestOfMigrations(): string {
	const hash = createHash('sha256').update(readFileSync('server/local/migrations.ts'));
	for (const file of readdirSync('drizzle').filter((name) => name.endsWith('.sql'))) {
		hash.update(file).update(readFileSync(`drizzle/${file}`));
	}
	return hash.digest('hex').slice(0, 16);
}
