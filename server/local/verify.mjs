import { spawnSync } from 'node:child_process';
import { build } from './build.mjs';
import { listDatabases } from './databases.mjs';
import { root } from './place.mjs';
import { start } from './postgres.mjs';
import { Problem, report } from './problem.mjs';
import { settings } from './serving.mjs';

/** `npm run verify`: the database that the environment names, otherwise the clone's demonstration. */
const database = 'halfdigit';

try {
	await build();
	const { status } = spawnSync(process.execPath, ['build/verify.js'], {
		cwd: root,
		env: process.env.DATABASE_URL ? process.env : await ofDemonstration(),
		stdio: 'inherit',
	});
	process.exitCode = status ?? 2;
} catch (error) {
	report(error);
	process.exitCode = 2;
}

async function ofDemonstration() {
	await start();
	if (!(await listDatabases(database)).includes(database)) {
		throw new Problem(
			'There is no demonstration yet (npm run demo), and DATABASE_URL names no database.',
		);
	}
	return settings(database, 4173);
}
