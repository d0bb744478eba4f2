import { spawnSync } from 'node:child_process';
import { readdirSync, readFileSync } from 'node:fs';
import { cpus } from 'node:os';

/** Whether this machine lets a thread have a processor to itself. */
export const hasProcessorToSpare = process.platform === 'linux' && cpus().length > 1;

/**
 * Does work while the main threads of the browser's pages have one processor and everything else that this program
 * started, the server and the browser's other threads among it, has the rest: what a page waits for then is its own.
 * The database is left as it is. Throws where `taskset` (util-linux) is missing.
 */
export async function onOwnProcessor<T>(work: () => Promise<T>): Promise<T> {
	const last = cpus().length - 1;
	const all = familyOf(process.pid);
	for (const pid of all) bind(['-a', '-c', '-p', `1-${last}`, String(pid)]);
	for (const pid of all.filter(isOfPages)) bind(['-c', '-p', '0', String(pid)]);
	try {
		return await work();
	} finally {
		for (const pid of familyOf(process.pid)) bind(['-a', '-c', '-p', `0-${last}`, String(pid)]);
	}
}

/** A process that has ended meanwhile needs no place. */
function bind(args: string[]): void {
	const { error } = spawnSync('taskset', args, { stdio: 'ignore' });
	if (error) throw error;
}

/** A process and all that came of it. */
function familyOf(pid: number): number[] {
	const parents = readdirSync('/proc')
		.filter((name) => /^\d+$/.test(name))
		.map((name) => ({
			pid: Number(name),
			parent: Number(read(name, 'stat').match(/\) . (\d+)/)?.[1]),
		}));
	const childrenOf = (one: number): number[] =>
		parents
			.filter(({ parent }) => parent === one)
			.flatMap((child) => [child.pid, ...childrenOf(child.pid)]);
	return [pid, ...childrenOf(pid)];
}

function isOfPages(pid: number): boolean {
	return read(String(pid), 'cmdline').includes('--type=renderer');
}

/** A file about a process; nothing where it has ended. */
function read(pid: string, file: string): string {
	try {
		return readFileSync(`/proc/${pid}/${file}`, 'utf8');
	} catch {
		return '';
	}
}
