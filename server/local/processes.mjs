import { readFileSync, readlinkSync } from 'node:fs';
import { setTimeout as wait } from 'node:timers/promises';

/**
 * Whether a process of this number runs (one that ended and waits to be reaped does not).
 * @param {number} pid
 */
export function isAlive(pid) {
	try {
		return !/^State:\s+Z/m.test(readFileSync(`/proc/${pid}/status`, 'utf8'));
	} catch {
		return false;
	}
}

/**
 * The folder a process works in; undefined when it is gone or belongs to somebody else.
 * @param {number} pid
 */
export function folderOf(pid) {
	try {
		return readlinkSync(`/proc/${pid}/cwd`);
	} catch {
		return undefined;
	}
}

/**
 * The words a process was started with; empty when it is gone.
 * @param {number} pid
 */
export function wordsOf(pid) {
	try {
		return readFileSync(`/proc/${pid}/cmdline`, 'utf8').split('\0').filter(Boolean);
	} catch {
		return [];
	}
}

/**
 * Waits until a process is gone. Returns whether it went within the time.
 * @param {number} pid
 * @param {number} limitMs
 */
async function gone(pid, limitMs) {
	const end = performance.now() + limitMs;
	while (isAlive(pid)) {
		if (performance.now() > end) return false;
		await wait(25);
	}
	return true;
}

/**
 * Ends a process: first politely, then for good.
 * @param {number} pid
 * @param {NodeJS.Signals} polite
 * @param {NodeJS.Signals} last
 * @param {number} patienceMs
 */
export async function end(pid, polite, last, patienceMs) {
	signal(pid, polite);
	if (await gone(pid, patienceMs)) return;
	signal(pid, last);
	await gone(pid, 5000);
}

/**
 * @param {number} pid
 * @param {NodeJS.Signals} name
 */
function signal(pid, name) {
	try {
		process.kill(pid, name);
	} catch (error) {
		if (/** @type {NodeJS.ErrnoException} */ (error).code !== 'ESRCH') throw error;
	}
}
