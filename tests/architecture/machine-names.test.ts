import { readFileSync } from 'node:fs';
import { expect, test } from 'vitest';
import { findMachineNames } from './machine-names';
import { paths } from './sources';

const thisFile = 'tests/architecture/machine-names.test.ts';

test('no file of the project names a folder of one machine or the host of a registry', () => {
	const found = paths()
		.filter((path) => path !== thisFile)
		.flatMap((path) =>
			findMachineNames(readFileSync(path, 'utf8')).map((name) => `${path}: ${name}`),
		);
	expect(found).toEqual([]);
});

test.each([
	['cd /home/someone/halfdigit', '/home/someone'],
	['import "/mnt/disk/src/a.ts"', '/mnt/disk'],
	['log in /tmp/run-1.log', '/tmp/run-1'],
	['"resolved": "https://registry.example.org/a.tgz"', '"resolved": "https:'],
	['npm --registry=https://registry.example.org', 'registry.example.org'],
])('the check finds it in %s', (text, expected) => {
	expect(findMachineNames(text)).toContain(expected);
});

test.each(['/usr/lib/postgresql', '$lib/home/page', 'routes/home/list', '{base}/home/a'])(
	'the check lets %s pass',
	(text) => {
		expect(findMachineNames(text)).toEqual([]);
	},
);
