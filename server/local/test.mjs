import { mkdirSync, rmSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { checks } from './checks.mjs';
import { endCommands } from './commands.mjs';
import { installPeers } from './debian.mjs';
import { alone } from './lock.mjs';
import { root } from './place.mjs';
import { release } from './postgres.mjs';
import { report } from './problem.mjs';
import { seconds, step } from './progress.mjs';
import { setUp } from './set-up.mjs';

const results = join(root, 'test-results');
const lastLine = join(results, 'last-line');
const from = performance.now();
// Each static check and each test counts as one; what stops the run before or between them counts as failed.
let passed = 0;
let failed = 0;
let ending = false;

/** @param {number} code */
async function finish(code) {
	if (ending) return;
	ending = true;
	endCommands();
	try {
		await release();
	} catch (error) {
		report(error);
		failed++;
	}
	const line = `${passed} passed, ${failed} failed`;
	writeFileSync(lastLine, `${line}\n`);
	process.stdout.write(`\nTook ${seconds(performance.now() - from)}.\n${line}\n`);
	process.exit(code || (failed > 0 ? 1 : 0));
}

for (const signal of /** @type {const} */ (['SIGINT', 'SIGTERM', 'SIGHUP'])) {
	process.on(signal, () => {
		failed++;
		void finish(130);
	});
}

mkdirSync(results, { recursive: true });
rmSync(lastLine, { force: true });
try {
	await alone('demo', async () => {
		await setUp(['postgresql', 'chromium']);
		await step('Programs to compare with', installPeers);
	});
	for (const check of checks) await runCheck(check);
} catch (error) {
	if (!ending) {
		report(error);
		failed++;
	}
}
await finish(0);

/** @param {import('./checks.mjs').Check} check */
async function runCheck(check) {
	let output = '';
	await step(check.title, async () => {
		const result = await check.run();
		passed += result.passed;
		failed += result.failed;
		const { again = 0 } = result;
		if (result.failed > 0 || again > 0) output = result.output;
		const line = `${result.passed} passed, ${result.failed} failed`;
		return again > 0 ? `${line} (${again} passed at the second try)` : line;
	});
	if (output) process.stdout.write(`\n${output.trim()}\n\n`);
}
