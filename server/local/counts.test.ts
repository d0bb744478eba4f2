import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, expect, test } from 'vitest';
import { agreeing, ofPlaywright, ofVitest } from './counts.mjs';

const folder = mkdtempSync(join(tmpdir(), 'halfdigit-counts-'));
const file = join(folder, 'report.json');

afterEach(() => rmSync(file, { force: true }));

function written(report: unknown): string {
	writeFileSync(file, JSON.stringify(report));
	return file;
}

test('a skipped test and a file that did not load count as failed', () => {
	const report = written({
		numPassedTests: 3,
		numTotalTests: 5,
		testResults: [
			{ status: 'passed', assertionResults: [1, 2, 3, 4, 5] },
			{ status: 'failed', assertionResults: [] },
		],
	});
	expect(ofVitest(report)).toEqual({ passed: 3, failed: 3 });
});

test('a browser test that passed only at a second try is told apart, a skipped one counts as failed', () => {
	const report = written({ stats: { expected: 4, unexpected: 1, flaky: 1, skipped: 1 } });
	expect(ofPlaywright(report)).toEqual({ passed: 5, failed: 2, again: 1 });
});

test.each([ofVitest, ofPlaywright])('a report that was never written is a failure', (read) => {
	expect(read(join(folder, 'none.json'))).toEqual({ passed: 0, failed: 1 });
});

test('a run that ended wrongly without a failed test has one failure all the same', () => {
	expect(agreeing({ passed: 7, failed: 0 }, 1)).toEqual({ passed: 7, failed: 1 });
	expect(agreeing({ passed: 7, failed: 2 }, 1)).toEqual({ passed: 7, failed: 2 });
	expect(agreeing({ passed: 7, failed: 0 }, 0)).toEqual({ passed: 7, failed: 0 });
});

test('a run without any test has a failure', () => {
	expect(agreeing({ passed: 0, failed: 0 }, 0)).toEqual({ passed: 0, failed: 1 });
});
