import { spawn } from 'node:child_process';
import { once } from 'node:events';
import { root } from './place.mjs';

/**
 * Runs one of the installed programs in the foreground, with this process's signals, and takes over its exit code.
 * @param {string} name
 * @param {string[]} words
 * @param {Record<string, string>} [settings] besides those of this process
 */
export async function runInstalled(name, words, settings = {}) {
	const child = spawn(`node_modules/.bin/${name}`, words, {
		cwd: root,
		env: { ...process.env, ...settings },
		stdio: 'inherit',
	});
	for (const signal of /** @type {const} */ (['SIGINT', 'SIGTERM'])) {
		process.on(signal, () => child.kill(signal));
	}
	const [code] = await once(child, 'exit');
	process.exitCode = /** @type {number | null} */ (code) ?? 1;
}
