import { existsSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { must } from './commands.mjs';
import { root } from './place.mjs';
import { Problem } from './problem.mjs';

/**
 * Runs `npm ci` unless what is installed is what the lock file names.
 * @returns {Promise<string>} a remark
 */
export async function ensureNodePackages() {
	const [major = 0, minor = 0] = process.versions.node.split('.').map(Number);
	if (major < 20 || (major === 20 && minor < 19)) {
		throw new Problem(`Node.js 20.19 or later is needed; this is ${process.version}.`);
	}
	const wanted = readLock(join(root, 'package-lock.json'));
	const installed = readLock(join(root, 'node_modules', '.package-lock.json'));
	if (wanted && installed && agree(wanted, installed)) return 'unchanged';
	const npm = process.env.npm_execpath;
	const [program, first] = npm ? [process.execPath, [npm]] : ['npm', []];
	await must(program, [...first, 'ci', '--include=dev', '--no-audit', '--no-fund']);
	return 'installed';
}

/** @typedef {Record<string, { version?: string, integrity?: string, optional?: boolean, devOptional?: boolean }>} Packages */

/**
 * npm writes the second kind of lock file last, so one that was cut off has none.
 * @param {string} file
 * @returns {Packages | undefined}
 */
function readLock(file) {
	if (!existsSync(file)) return undefined;
	return /** @type {{ packages: Packages }} */ (JSON.parse(readFileSync(file, 'utf8'))).packages;
}

/**
 * @param {Packages} wanted
 * @param {Packages} installed
 */
function agree(wanted, installed) {
	return Object.entries(wanted).every(([place, entry]) => {
		if (place === '') return true;
		const there = installed[place];
		// An optional package may be for another kind of machine.
		if (!there) return entry.optional === true || entry.devOptional === true;
		return there.version === entry.version && there.integrity === entry.integrity;
	});
}
