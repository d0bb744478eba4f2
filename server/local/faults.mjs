import { parseArgs } from 'node:util';
import { installTracer } from './debian.mjs';
import { alone } from './lock.mjs';
import { release } from './postgres.mjs';
import { Problem, report } from './problem.mjs';
import { step } from './progress.mjs';
import { runInstalled } from './running.mjs';
import { setUp } from './set-up.mjs';

/** `npm run faults [-- --seed N --only id,id]`: sets up as the tests do, then breaks what can break, in the long form. */
try {
	const { seed = '', only = '' } = read();
	await alone('demo', async () => {
		await setUp(['postgresql']);
		await step('Program to trace with', installTracer);
	});
	await runInstalled('vitest', ['run', '--project', 'faults', '--reporter', 'verbose'], {
		FAULTS_FORM: 'full',
		FAULTS_SEED: seed,
		FAULTS_ONLY: only,
	});
} catch (error) {
	report(error);
	process.exitCode = 1;
}
await release();

function read() {
	try {
		const options = /** @type {const} */ ({ seed: { type: 'string' }, only: { type: 'string' } });
		const { values } = parseArgs({ options });
		if (values.seed !== undefined && !/^\d{1,10}$/.test(values.seed))
			throw new Error('--seed takes a number.');
		return values;
	} catch (error) {
		throw new Problem(
			`${error instanceof Error ? error.message : String(error)}\nUse: npm run faults -- --seed 7 --only disk-full,nemesis`,
		);
	}
}
