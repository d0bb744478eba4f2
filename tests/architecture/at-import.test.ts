import { spawn } from 'node:child_process';
import { connect, createServer } from 'node:net';
import { beforeAll, describe, expect, test } from 'vitest';
import { effectsOf } from './at-import';

/** The build loads server modules, and a missing setting must be reported by the entry, not by an import. */
const modules = import.meta.glob([
	'../../src/lib/**/*.ts',
	'!**/*.test.ts',
	'../../server/sync/**/*.ts',
]);

beforeAll(() => {
	for (const name of ['DATABASE_URL', 'ORIGIN', 'AUTH_SECRET', 'PORT'])
		Reflect.deleteProperty(process.env, name);
});

test('there are modules to load', () => {
	expect(Object.keys(modules).length).toBeGreaterThan(30);
});

test('no module throws, connects, listens or starts a process when it is imported', async () => {
	const found: string[] = [];
	for (const [path, load] of Object.entries(modules)) {
		found.push(...(await effectsOf(load)).map((effect) => `${path} ${effect}`));
	}
	expect(found).toEqual([]);
}, 60_000);

describe('the check', () => {
	test('sees a module that throws', async () => {
		expect(await effectsOf(() => Promise.reject(new Error('no settings')))).toEqual([
			'throws no settings',
		]);
	});

	test('sees a module that listens and one that connects', async () => {
		const server = createServer();
		const listening = await effectsOf(
			() => new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve)),
		);
		expect(listening).toEqual(['listens']);
		const address = server.address();
		const port = typeof address === 'object' && address ? address.port : 0;
		const connecting = await effectsOf(
			() =>
				new Promise<void>((resolve) => {
					const socket = connect(port, '127.0.0.1', () => socket.destroy());
					socket.once('close', () => resolve());
				}),
		);
		expect(connecting).toEqual(['connects']);
		await new Promise((resolve) => server.close(resolve));
	});

	test('sees a module that starts a process', async () => {
		const effects = await effectsOf(
			() => new Promise((resolve) => spawn('true').once('exit', resolve)),
		);
		expect(effects).toContain('starts a process');
	});
});
