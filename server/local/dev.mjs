import { spawn } from 'node:child_process';
import { watch } from './bundle.mjs';
import { collect, must } from './commands.mjs';
import { createDatabase, listDatabases } from './databases.mjs';
import { root } from './place.mjs';
import { isFree } from './ports.mjs';
import { migrationSettings } from './migration-settings.mjs';
import { release, start } from './postgres.mjs';
import { Problem, report } from './problem.mjs';
import { step } from './progress.mjs';
import { settings } from './serving.mjs';

/**
 * Development: pages by Vite, sockets by a server that restarts at each change, both on a database of their own
 * with the demonstration in it. Run `npm ci` once before.
 */
const database = 'development';
const pagesPort = 5173;
const syncPort = 4174;

/** @type {import('node:child_process').ChildProcess[]} */
const children = [];
let ending = false;

async function finish() {
	if (ending) return;
	ending = true;
	for (const child of children) child.kill('SIGTERM');
	await release();
	process.exit();
}

process.on('SIGINT', () => void finish());
process.on('SIGTERM', () => void finish());

try {
	for (const port of [pagesPort, syncPort]) {
		if (!(await isFree(port))) throw new Problem(`Port ${port} is taken by another program.`);
	}
	await step('PostgreSQL', () => start({ owned: true }).then(() => undefined));
	const env = {
		...settings(database, pagesPort),
		NODE_ENV: 'development',
		EVALUATOR_ENTRY: 'build/evaluator.js',
		SYNC_PORT: String(syncPort),
	};
	await step('Evaluator and typesetter', () => watch(['evaluator', 'typesetter']));
	await step('Database and demonstration', async () => {
		await collect('npx', ['svelte-kit', 'sync']);
		if (!(await listDatabases(database)).includes(database)) await createDatabase(database);
		await must('npx', ['tsx', 'server/local/migrate.ts'], { env: migrationSettings(database) });
		await must('npx', ['tsx', 'server/local/demonstration.ts'], { env });
	});
	run(['vite', 'dev', '--port', String(pagesPort), '--strictPort'], env);
	run(['tsx', 'watch', 'server/main.ts'], { ...env, ROLES: 'sync', PORT: String(syncPort) });
} catch (error) {
	report(error);
	process.exitCode = 1;
	await finish();
}

/**
 * @param {string[]} words
 * @param {Record<string, string>} env
 */
function run(words, env) {
	const child = spawn('npx', words, { cwd: root, env, stdio: 'inherit' });
	children.push(child);
	child.once('exit', () => void finish());
}
