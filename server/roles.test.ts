import { describe, expect, test } from 'vitest';
import { checkNodeOptions, readRoles } from './roles';

test('roles are read from a list', () => {
	expect(readRoles('web,sync')).toEqual(new Set(['web', 'sync']));
	expect(readRoles(' sync ')).toEqual(new Set(['sync']));
	expect(readRoles('jobs, sync')).toEqual(new Set(['sync', 'jobs']));
});

test.each(['', 'cooking', 'web,cooking', 'web,,sync'])('"%s" is no list of roles', (text) => {
	expect(() => readRoles(text)).toThrow('ROLES');
});

describe('NODE_OPTIONS', () => {
	test.each([
		'--max-old-space-size=4096',
		'--enable-source-maps --max_old_space_size=1',
		'--max-semi-space-size=64',
		'--max-heap-size=100',
		'--initial-heap-size=1',
	])('with the heap flag %s is refused', (options) => {
		expect(() => checkNodeOptions(options)).toThrow('NODE_OPTIONS');
	});

	test.each([undefined, '', '--enable-source-maps', '--heapsnapshot-signal=SIGUSR2'])(
		'%s is let through',
		(options) => {
			expect(() => checkNodeOptions(options)).not.toThrow();
		},
	);
});
