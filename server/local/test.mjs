import { mkdirSync, rmSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { build } from './build.mjs';
import { checks } from './checks.mjs';
import { endCommands } from './commands.mjs';
import { ensurePackages } from './debian.mjs';
import { alone } from './lock.mjs';
import { ensureNodePackages } from './node-packages.mjs';
import { root } from './place.mjs';
import { release, start } from './postgres.mjs';
import { report } from './problem.mjs';
import { seconds, step } from './progress.mjs';

const results = join(root, 'test-results');
const lastLine = join(results, 'last-line');
const from = performance.now();
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
	await alone('demo', prepare);
	for (const check of checks) await runCheck(check);
} catch (error) {
	if (!ending) {
		report(error);
		failed++;
	}
}
await finish(0);

async function prepare() {
	await step('Debian packages', () => ensurePackages(['postgresql', 'chromium']));
	await step('Node.js packages', ensureNodePackages);
	await build();
	await step('PostgreSQL', async () => {
		const { started, port } = await start({ owned: true });
		return `${started ? 'started' : 'runs already'}, 127.0.0.1:${port}`;
	});
}

/** @param {import('./checks.mjs').Check} check */
async function runCheck(check) {
	let output = '';
	await step(check.title, async () => {
		const result = await check.run();
		passed += result.passed;
		failed += result.failed;
		if (result.failed > 0) output = result.output;
		return `${result.passed} passed, ${result.failed} failed`;
	});
	if (output) process.stdout.write(`\n${output.trim()}\n\n`);
}
