import { spawnSync } from 'node:child_process';
import { existsSync, readdirSync } from 'node:fs';
import { join } from 'node:path';
import { Problem } from './problem.mjs';

const versionsFolder = '/usr/lib/postgresql';

/**
 * The folder of PostgreSQL's programs as Debian installs them: of the wanted version, otherwise the newest.
 * @param {string} [version]
 * @returns {string | undefined}
 */
export function findPrograms(version) {
	if (!existsSync(versionsFolder)) return undefined;
	const versions = readdirSync(versionsFolder)
		.filter((name) => existsSync(join(versionsFolder, name, 'bin', 'initdb')))
		.sort((a, b) => Number(b) - Number(a));
	const chosen = version ? versions.find((name) => name === version) : versions[0];
	return chosen && join(versionsFolder, chosen, 'bin');
}

/**
 * Who PostgreSQL runs as: it refuses root, so root hands over to Debian's system user `postgres`.
 * @returns {{ uid: number, gid: number } | undefined} undefined when this process is not root
 */
export function databaseUser() {
	if (process.getuid?.() !== 0) return undefined;
	const [uid, gid] = ['-u', '-g'].map((flag) => {
		const asked = spawnSync('id', [flag, 'postgres'], { encoding: 'utf8' });
		return asked.status === 0 ? Number(asked.stdout) : undefined;
	});
	if (uid === undefined || gid === undefined) {
		throw new Problem(
			'PostgreSQL does not run as root, and the system user "postgres" is missing.\nMend: apt-get install postgresql',
		);
	}
	return { uid, gid };
}

/**
 * Runs one of PostgreSQL's programs as the database user and returns what it printed.
 * @param {string} program
 * @param {string[]} words
 * @param {{ input?: string, env?: Record<string, string> }} [options]
 */
export function runProgram(program, words, options = {}) {
	const done = spawnSync(program, words, {
		...databaseUser(),
		cwd: '/',
		env: { PATH: '/usr/bin:/bin', LANG: 'C.UTF-8', ...options.env },
		encoding: 'utf8',
		input: options.input ?? '',
	});
	if (done.error) throw done.error;
	if (done.status !== 0) {
		throw new Problem(`${program} ${words.join(' ')} failed:\n${done.stdout}${done.stderr}`);
	}
	return done.stdout;
}
