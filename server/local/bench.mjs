import { spawn } from 'node:child_process';
import { once } from 'node:events';
import { alone } from './lock.mjs';
import { root } from './place.mjs';
import { release } from './postgres.mjs';
import { report } from './problem.mjs';
import { setUp } from './set-up.mjs';

/** `npm run bench [-- engine page sync setup]`: sets up as the tests do, then measures. */
try {
	await alone('demo', () => setUp(['postgresql', 'chromium']));
	const child = spawn('node_modules/.bin/tsx', ['tests/bench/run.ts', ...process.argv.slice(2)], {
		cwd: root,
		stdio: 'inherit',
	});
	for (const signal of /** @type {const} */ (['SIGINT', 'SIGTERM'])) {
		process.on(signal, () => child.kill(signal));
	}
	const [code] = await once(child, 'exit');
	process.exitCode = /** @type {number | null} */ (code) ?? 1;
} catch (error) {
	report(error);
	process.exitCode = 1;
}
await release();
