import { readFileSync } from 'node:fs';
import { describe, expect, test } from 'vitest';
import { copies, findOutdated, type Lock } from './versions';

const lock = JSON.parse(readFileSync('package-lock.json', 'utf8')) as Lock;

test('every locked package is new enough and there once where it must be', () => {
	expect(findOutdated(lock)).toEqual([]);
});

test('the packages that the product stands on are in the lock file', () => {
	for (const name of ['yjs', 'lib0', 'y-protocols', '@auth/core', 'ws', 'mathjs', 'drizzle-orm']) {
		expect(copies(lock, name), name).toHaveLength(1);
	}
});

describe('the check of the lock file', () => {
	const made = (packages: Record<string, string>): Lock => ({
		packages: Object.fromEntries(
			Object.entries(packages).map(([path, version]) => [`node_modules/${path}`, { version }]),
		),
	});

	test.each([
		['8.21.0', ['ws 8.21.0 is older than 8.21.1']],
		['8.9.30', ['ws 8.9.30 is older than 8.21.1']],
		['8.21.1-rc.1', ['ws 8.21.1-rc.1 is older than 8.21.1']],
		['8.21.1', []],
		['9.0.0', []],
	])('judges ws %s', (version, expected) => {
		expect(findOutdated(made({ ws: version }))).toEqual(expected);
	});

	test('finds an old copy inside another package', () => {
		expect(findOutdated(made({ ws: '8.22.0', 'a/node_modules/ws': '7.5.0' }))).toEqual([
			'ws 7.5.0 is older than 8.21.1',
		]);
	});

	test('finds a second copy of yjs', () => {
		expect(findOutdated(made({ yjs: '13.6.30', 'a/node_modules/yjs': '13.6.30' }))).toEqual([
			'yjs is there more than once: 13.6.30, 13.6.30',
		]);
	});
});
