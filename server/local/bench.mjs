import { alone } from './lock.mjs';
import { release } from './postgres.mjs';
import { report } from './problem.mjs';
import { runInstalled } from './running.mjs';
import { setUp } from './set-up.mjs';

/** `npm run bench [-- engine page sync load signing comparison setup]`: sets up as the tests do, then measures. */
try {
	await alone('demo', () => setUp(['postgresql', 'chromium']));
	await runInstalled('tsx', ['tests/bench/run.ts', ...process.argv.slice(2)]);
} catch (error) {
	report(error);
	process.exitCode = 1;
}
await release();
