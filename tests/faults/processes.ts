import { readdirSync, readFileSync } from 'node:fs';
import { folderOf, isAlive, wordsOf } from '../../server/local/processes.mjs';

/** Numbers of the processes that a process has started (Linux). */
export function childrenOf(pid: number): number[] {
	try {
		const file = `/proc/${pid}/task/${pid}/children`;
		return readFileSync(file, 'utf8').split(' ').filter(Boolean).map(Number);
	} catch {
		return [];
	}
}

/** The evaluators of a server process. */
export function evaluatorsOf(pid: number): number[] {
	return childrenOf(pid).filter((child) => wordsOf(child).some((w) => w.endsWith('evaluator.js')));
}

/** Megabytes that a process holds in memory. */
export function megabytesOf(pid: number): number {
	const status = readFileSync(`/proc/${pid}/status`, 'utf8');
	return Number(/^VmRSS:\s+(\d+)/m.exec(status)?.[1] ?? NaN) / 1024;
}

const kind = 'faults';

/** Words by which a server of a fault run is known in the process list. */
export const nameInList = () => [kind, String(process.pid)];

/** Ends the servers of runs that were killed themselves. */
export function sweepServers(): void {
	for (const pid of readdirSync('/proc').map(Number).filter(Boolean)) {
		const [, script = '', startedFor, starter] = wordsOf(pid);
		if (!script.endsWith('/main.js') || startedFor !== kind) continue;
		if (folderOf(pid) !== process.cwd() || isAlive(Number(starter))) continue;
		// It may have been stopped.
		process.kill(pid, 'SIGKILL');
	}
}
