import { rmSync } from 'node:fs';
import { join } from 'node:path';
import { collect } from './commands.mjs';
import * as counts from './counts.mjs';
import { root } from './place.mjs';

/** @typedef {import('./counts.mjs').Counts} Counts */
/** @typedef {{ title: string, run: () => Promise<Counts & { output: string }> }} Check */

/** Longest time that one check may take; the browser tests take about a third of it on two quiet processors. */
const longestMs = 45 * 60_000;

/** Everything `npm test` runs after the set-up, in this order. Each static check counts as one. */
export const checks = [
	single('Format', 'prettier', '--check', '.'),
	single('Lint', 'eslint', '.', '--max-warnings', '0'),
	single('Types', 'npm', 'run', '--silent', 'check'),
	single('Dead code', 'knip'),
	vitest('Unit tests', 'unit'),
	vitest('Database tests', 'db'),
	vitest('Sync tests', 'sync'),
	vitest('Fault tests', 'faults', 'fault-tests'),
	suite('Browser tests', 'browser', counts.ofPlaywright, ['playwright', 'test']),
];

/**
 * @param {string} title
 * @param {string[]} command
 * @returns {Check}
 */
function single(title, ...command) {
	return {
		title,
		run: async () => {
			const { code, output } = await runTool(command);
			return { ...counts.agreeing({ passed: code === 0 ? 1 : 0, failed: 0 }, code), output };
		},
	};
}

/**
 * @param {string} title
 * @param {string} project
 * @param {string} [name] of the report in `test-results/`
 */
function vitest(title, project, name = project) {
	const reporters = ['--reporter=default', '--reporter=json'];
	return suite(title, name, counts.ofVitest, [
		...['vitest', 'run', '--project', project, ...reporters],
		...['--outputFile.json', `test-results/${name}.json`],
	]);
}

/**
 * @param {string} title
 * @param {string} name of the report in `test-results/`
 * @param {(file: string) => Counts} read
 * @param {string[]} command
 * @returns {Check}
 */
function suite(title, name, read, command) {
	return {
		title,
		run: async () => {
			const report = join(root, 'test-results', `${name}.json`);
			rmSync(report, { force: true });
			const { code, output } = await runTool(command);
			return { ...counts.agreeing(read(report), code), output };
		},
	};
}

/** @param {string[]} command */
function runTool([program = '', ...words]) {
	const bin = join(root, 'node_modules', '.bin');
	const env = {
		PATH: `${bin}:${process.env.PATH ?? ''}`,
		CI: 'true',
		NO_COLOR: '1',
		FORCE_COLOR: undefined,
	};
	return collect(program, words, { env, limitMs: longestMs });
}
