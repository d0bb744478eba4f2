import { existsSync, readFileSync } from 'node:fs';

/** @typedef {{ passed: number, failed: number, again?: number }} Counts `again`: how many passed at a second try only. */

/**
 * What a run of Vitest wrote with its JSON reporter. A file that did not load counts as one failure, and so does
 * a skipped test: it has not shown anything.
 * @param {string} file
 * @returns {Counts}
 */
export function ofVitest(file) {
	/** @type {{ numPassedTests: number, numTotalTests: number, testResults: { status: string, assertionResults: unknown[] }[] } | undefined} */
	const report = read(file);
	if (!report) return { passed: 0, failed: 1 };
	const unloaded = report.testResults.filter(
		(result) => result.status === 'failed' && result.assertionResults.length === 0,
	).length;
	const passed = report.numPassedTests;
	return { passed, failed: report.numTotalTests - passed + unloaded };
}

/**
 * What a run of Playwright wrote with its JSON reporter. A browser on a busy machine gets a second try, and who needed it is told.
 * @param {string} file
 * @returns {Counts}
 */
export function ofPlaywright(file) {
	/** @type {{ stats: { expected: number, unexpected: number, flaky: number, skipped: number } } | undefined} */
	const report = read(file);
	if (!report) return { passed: 0, failed: 1 };
	const { expected, unexpected, flaky, skipped } = report.stats;
	return { passed: expected + flaky, failed: unexpected + skipped, again: flaky };
}

/**
 * Counts that agree with the exit code: a run that failed, or that ran nothing, has at least one failure.
 * @param {Counts} counts
 * @param {number} code
 * @returns {Counts}
 */
export function agreeing({ passed, failed, ...more }, code) {
	const wrong = code !== 0 || passed + failed === 0;
	return { passed, failed: wrong && failed === 0 ? 1 : failed, ...more };
}

/**
 * @template T
 * @param {string} file
 * @returns {T | undefined}
 */
function read(file) {
	if (!existsSync(file)) return undefined;
	try {
		return /** @type {T} */ (JSON.parse(readFileSync(file, 'utf8')));
	} catch {
		return undefined;
	}
}
