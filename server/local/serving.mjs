import { spawn } from 'node:child_process';
import { closeSync, openSync, readFileSync, readdirSync } from 'node:fs';
import { setTimeout as wait } from 'node:timers/promises';
import { authSecret, signingKeyFile } from './secret.mjs';
import { inData, root } from './place.mjs';
import { applicationUrl } from './postgres.mjs';
import { Problem } from './problem.mjs';
import { end, folderOf, wordsOf } from './processes.mjs';

/** @typedef {{ pid: number, url: string, stop: () => Promise<void>, ended: Promise<void> }} Serving */

/**
 * Everything a server program gets as its environment on this machine: nothing else of the caller's reaches it.
 * @param {string} database
 * @param {number} port
 * @returns {Record<string, string>}
 */
export function settings(database, port) {
	const { PATH = '/usr/bin:/bin', HOME = '/', EVALUATORS, LOG_LEVEL } = process.env;
	return {
		PATH,
		HOME,
		NODE_ENV: 'production',
		DATABASE_URL: applicationUrl(database),
		ORIGIN: `http://localhost:${port}`,
		PORT: String(port),
		AUTH_SECRET: authSecret(),
		SIGNING_KEY_FILE: signingKeyFile(),
		CHECKPOINT_FOLDER: checkpointFolder(database),
		...(EVALUATORS && { EVALUATORS }),
		...(LOG_LEVEL && { LOG_LEVEL }),
	};
}

/**
 * Where the checkpoints of a database's record are kept.
 * @param {string} database
 */
export function checkpointFolder(database) {
	return inData('checkpoints', database);
}

/**
 * Starts the production entry and waits until it answers.
 * @param {{ database: string, port: number, kind: string, log: string, more?: Record<string, string> }} options `kind`
 * names in the process list what it was started for, `log` is the file of what it prints, `more` are settings besides
 * @returns {Promise<Serving>}
 */
export async function serve({ database, port, kind, log, more }) {
	const output = openSync(log, 'w');
	const child = spawn(process.execPath, ['build/main.js', kind, String(process.pid)], {
		cwd: root,
		env: { ...settings(database, port), ...more },
		stdio: ['ignore', output, output],
		// Ctrl-C reaches only the starter, which ends the server in good order.
		detached: true,
	});
	closeSync(output);
	const ended = new Promise((resolve) => child.once('exit', () => resolve(undefined)));
	const pid = child.pid ?? 0;
	const stop = () => end(pid, 'SIGTERM', 'SIGKILL', 8000);
	const url = `http://localhost:${port}`;
	try {
		await answers(port, () => child.exitCode === null && child.signalCode === null);
	} catch (error) {
		await stop();
		const lines = readFileSync(log, 'utf8').trimEnd().split('\n').slice(-15).join('\n');
		throw new Problem(`${error instanceof Error ? error.message : String(error)}\n${lines}`);
	}
	return { pid, url, stop, ended: /** @type {Promise<void>} */ (ended) };
}

/**
 * Ends servers that this clone started for `kind` earlier, with the process that started them: all of them, or only
 * those whose starter is gone.
 * @param {string} kind
 * @param {{ onlyOrphans?: boolean }} [options]
 * @returns {Promise<number>} how many there were
 */
export async function endEarlier(kind, { onlyOrphans = false } = {}) {
	let count = 0;
	for (const pid of readdirSync('/proc').map(Number).filter(Boolean)) {
		const [, script, startedFor, starterText] = wordsOf(pid);
		if (script !== 'build/main.js' || startedFor !== kind || folderOf(pid) !== root) continue;
		const starter = Number(starterText);
		const starterRuns = isScriptOfOurs(starter);
		if (onlyOrphans && starterRuns) continue;
		count++;
		// The starter ends its server and its database in good order.
		if (starterRuns) await end(starter, 'SIGTERM', 'SIGKILL', 30_000);
		await end(pid, 'SIGTERM', 'SIGKILL', 8000);
	}
	return count;
}

/** @param {number} pid */
function isScriptOfOurs(pid) {
	return folderOf(pid) === root && wordsOf(pid)[1]?.startsWith('server/local/') === true;
}

/**
 * @param {number} port
 * @param {() => boolean} runs
 */
async function answers(port, runs) {
	const limit = performance.now() + 30_000;
	while (performance.now() < limit) {
		if (!runs()) throw new Error('The server ended instead of serving:');
		try {
			const response = await fetch(`http://127.0.0.1:${port}/sign-in`);
			await response.arrayBuffer();
			if (response.ok) return;
			if (response.status >= 500) throw new Problem(`The server answers with ${response.status}:`);
		} catch (error) {
			if (error instanceof Problem) throw error;
		}
		await wait(50);
	}
	throw new Error('The server does not answer within 30 s:');
}
