import { spawn, type ChildProcess } from 'node:child_process';
import { once } from 'node:events';
import { createServer, type AddressInfo } from 'node:net';

/** Where the built programs are; another folder keeps a run apart from a build that goes on. */
const build = process.env.BUILD_FOLDER ?? 'build';

/** What a test that failed has left running ends with its process. */
const running = new Set<ChildProcess>();
process.once('exit', () => running.forEach((child) => child.kill('SIGKILL')));

/** The production entry, serving sockets only. */
export interface SyncServer {
	/** ws://host:port/sync */
	url: string;
	port: number;
	pid: number;
	/** Ends it with a signal and waits until it is gone. Returns its exit code, null where the signal ended it. */
	stop(signal?: NodeJS.Signals): Promise<number | null>;
}

export const syncUrl = (port: number) => `ws://127.0.0.1:${port}/sync`;

/**
 * Starts the built entry with the settings of this process, on a free port unless `PORT` is among the settings given,
 * and waits until it listens. `words` only show in the process list.
 */
export async function startSyncServer(
	settings: Record<string, string> = {},
	words: string[] = [],
): Promise<SyncServer> {
	const port = settings.PORT ? Number(settings.PORT) : await freePort();
	const child = spawn(process.execPath, [`${build}/main.js`, ...words], {
		env: { ...process.env, ...ownSettings(port), ...settings },
		stdio: ['ignore', 'pipe', 'pipe'],
	});
	running.add(child);
	const gone = once(child, 'exit').finally(() => running.delete(child));
	await listening(child);
	return {
		url: syncUrl(port),
		port,
		pid: child.pid ?? 0,
		stop: async (signal = 'SIGTERM') => {
			child.kill(signal);
			await gone;
			return child.exitCode;
		},
	};
}

/** Runs the built entry until it ends by itself; gives its exit code and what it wrote to standard error. */
export async function runEntry(
	settings: Record<string, string>,
): Promise<{ code: number | null; errors: string }> {
	const child = spawn(process.execPath, [`${build}/main.js`], {
		env: { ...process.env, ...settings },
		stdio: ['ignore', 'ignore', 'pipe'],
	});
	let errors = '';
	child.stderr.on('data', (chunk: Buffer) => (errors += chunk.toString()));
	await once(child, 'close');
	return { code: child.exitCode, errors };
}

function ownSettings(port: number): Record<string, string> {
	return {
		ROLES: 'sync',
		LOG_LEVEL: 'info',
		PORT: String(port),
		EVALUATOR_ENTRY: `${build}/evaluator.js`,
		TYPESETTER_ENTRY: `${build}/typesetter.js`,
	};
}

function listening(child: ChildProcess): Promise<void> {
	let output = '';
	return new Promise((resolve, reject) => {
		let listens = false;
		const read = (chunk: Buffer) => {
			if (listens) return;
			output += chunk.toString();
			listens = output.includes('"msg":"listening"');
			if (listens) resolve();
		};
		child.stdout?.on('data', read);
		child.stderr?.on('data', read);
		child.once('exit', (code) => reject(new Error(`the server ended with ${code}:\n${output}`)));
	});
}

/** A port of the loopback address on which nothing listens. */
export async function freePort(): Promise<number> {
	const probe = createServer().listen(0, '127.0.0.1');
	await once(probe, 'listening');
	const { port } = probe.address() as AddressInfo;
	probe.close();
	await once(probe, 'close');
	return port;
}
