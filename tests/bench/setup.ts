import { spawn, spawnSync } from 'node:child_process';
import { once } from 'node:events';
import { chmodSync, mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { root } from '../../server/local/place.mjs';
import { firstFree } from '../../server/local/ports.mjs';
import { row, type Row } from './row';

const limitMs = 5 * 60_000;

/** `npm run demo` in a new clone of what is committed, until it says that it serves; then once more. */
export async function setupRows(): Promise<Row[]> {
	const folder = mkdtempSync(join(tmpdir(), 'halfdigit-bench-'));
	// The database's user must be able to walk in.
	chmodSync(folder, 0o755);
	try {
		const clone = join(folder, 'clone');
		const made = spawnSync('git', ['clone', '--quiet', '--no-hardlinks', root, clone]);
		if (made.status !== 0) throw new Error(`the clone failed: ${made.stderr.toString()}`);
		const port = await firstFree(4373);
		const fresh = await startMs(clone, port);
		const second = await startMs(clone, port);
		return [
			row({
				id: 'setup.demo-fresh',
				what: 'npm run demo from a fresh clone until it serves',
				value: fresh / 1000,
				unit: 's',
				target: 180,
			}),
			row({
				id: 'setup.demo-second',
				what: 'the same, started a second time',
				value: second / 1000,
				unit: 's',
				target: 15,
			}),
		];
	} finally {
		rmSync(folder, { recursive: true, force: true });
	}
}

async function startMs(clone: string, port: number): Promise<number> {
	const from = performance.now();
	const env = { ...process.env, PORT: String(port) };
	const child = spawn('npm', ['run', 'demo'], {
		cwd: clone,
		env,
		stdio: ['ignore', 'pipe', 'pipe'],
		detached: true,
	});
	const gone = once(child, 'exit');
	let output = '';
	const served = new Promise<number>((resolve, reject) => {
		const limit = setTimeout(() => reject(new Error(`not served in time:\n${output}`)), limitMs);
		const read = (bytes: Buffer) => {
			output += bytes.toString();
			if (!output.includes(`http://localhost:${port} `)) return;
			clearTimeout(limit);
			resolve(performance.now() - from);
		};
		child.stdout.on('data', read);
		child.stderr.on('data', read);
		child.once('exit', () => {
			clearTimeout(limit);
			reject(new Error(`it ended instead:\n${output}`));
		});
	});
	try {
		return await served;
	} finally {
		// As Ctrl-C does, which a terminal sends to the whole group.
		if (child.pid && child.exitCode === null) process.kill(-child.pid, 'SIGINT');
		await gone;
	}
}
