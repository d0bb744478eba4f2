import { spawn } from 'node:child_process';
import { Problem } from './problem.mjs';
import { root } from './place.mjs';

/**
 * @typedef {object} Options
 * @property {NodeJS.ProcessEnv} [env] added to this process's environment
 * @property {number} [limitMs] after which the command and its children are ended
 * @typedef {{ code: number, output: string }} Ended
 */

/** @type {Set<import('node:child_process').ChildProcess>} */
const running = new Set();

/**
 * Runs a command in the clone's folder and collects what it prints. It has a process group of its own, so that
 * it ends together with all its children.
 * @param {string} program
 * @param {string[]} words
 * @param {Options} [options]
 * @returns {Promise<Ended>}
 */
export function collect(program, words, options = {}) {
	const { limitMs = 15 * 60_000 } = options;
	return new Promise((resolve, reject) => {
		const child = spawn(program, words, {
			cwd: root,
			env: { ...process.env, ...options.env },
			stdio: ['ignore', 'pipe', 'pipe'],
			detached: true,
		});
		running.add(child);
		let output = '';
		const take = (/** @type {Buffer} */ bytes) => (output += bytes.toString());
		child.stdout.on('data', take);
		child.stderr.on('data', take);
		const limit = setTimeout(() => {
			output += `\nEnded after ${limitMs / 1000} s, its limit.\n`;
			endGroup(child);
		}, limitMs);
		child.once('error', (error) => {
			clearTimeout(limit);
			reject(error);
		});
		// `exit`, not `close`: a grandchild that keeps the pipe must not keep us.
		child.once('exit', (code, signal) => {
			clearTimeout(limit);
			running.delete(child);
			setImmediate(() =>
				resolve({ code: code ?? 1, output: signal ? `${output}\n${signal}` : output }),
			);
		});
	});
}

/**
 * Runs a command that must succeed; otherwise throws a Problem with what it printed.
 * @param {string} program
 * @param {string[]} words
 * @param {Options} [options]
 */
export async function must(program, words, options) {
	const { code, output } = await collect(program, words, options);
	if (code !== 0) throw new Problem(`${program} ${words.join(' ')} failed:\n${output}`);
	return output;
}

/** Ends every command that still runs, with its children. */
export function endCommands() {
	for (const child of running) endGroup(child);
}

/** @param {import('node:child_process').ChildProcess} child */
function endGroup(child) {
	try {
		if (child.pid) process.kill(-child.pid, 'SIGKILL');
	} catch {
		// It ended by itself meanwhile.
	}
}
