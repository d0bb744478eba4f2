import { createHash, randomBytes } from 'node:crypto';
import { spawnSync } from 'node:child_process';
import {
	appendFileSync,
	chmodSync,
	chownSync,
	existsSync,
	mkdirSync,
	readFileSync,
	readdirSync,
	renameSync,
	rmSync,
	writeFileSync,
} from 'node:fs';
import { basename, dirname, join } from 'node:path';
import { dataFolder, inData, root } from './place.mjs';
import { databaseUser, findPrograms, runProgram } from './postgres-programs.mjs';
import { Problem } from './problem.mjs';

/**
 * What `.data/postgres.json` remembers. The role `halfdigit` owns the databases and migrates them, `halfdigit_app` is the
 * application's own, with fewer rights; neither is a superuser.
 * `owner` is the process that started the server and stops it when it ends itself.
 * @typedef {{ folder: string, port: number, password: string, superuserPassword: string,
 *   applicationPassword?: string, owner?: number }} Cluster
 */

const memory = join(dataFolder, 'postgres.json');

/**
 * The clone's own cluster, if it was made.
 * @returns {Cluster | undefined}
 */
export function findCluster() {
	if (!existsSync(memory)) return undefined;
	const cluster = /** @type {Cluster} */ (JSON.parse(readFileSync(memory, 'utf8')));
	return existsSync(join(cluster.folder, 'PG_VERSION')) ? cluster : undefined;
}

/** @param {Cluster} cluster */
export function remember(cluster) {
	const draft = inData('postgres.json.new');
	writeFileSync(draft, JSON.stringify(cluster, null, '\t'), { mode: 0o600 });
	renameSync(draft, memory);
}

/**
 * The clone's own cluster, made anew.
 * @param {number} port
 * @returns {Cluster}
 */
export function makeCluster(port) {
	return createCluster(chooseFolder('postgres'), port, remember);
}

/**
 * Makes a cluster beside its place and moves it there when it is whole, so that a start that was killed
 * half-way leaves only a folder that the next one throws away.
 * @param {string} folder
 * @param {number} port
 * @param {(cluster: Cluster) => void} [keep] called before the cluster is at its place
 * @returns {Cluster}
 */
export function createCluster(folder, port, keep) {
	const programs = findPrograms();
	if (!programs) throw new Problem('PostgreSQL is missing.\nMend: apt-get install postgresql');
	sweep(folder);
	const making = `${folder}.making.${process.pid}`;
	mkdirSync(making, { mode: 0o700 });
	own(making);

	const cluster = { folder, port, password: secret(), superuserPassword: secret() };
	const passwordFile = join(making, 'superuser');
	writeFileSync(passwordFile, cluster.superuserPassword, { mode: 0o600 });
	own(passwordFile);
	const files = join(making, 'cluster');
	runProgram(join(programs, 'initdb'), [
		...['--pgdata', files, '--username', 'postgres', '--pwfile', passwordFile],
		...['--auth', 'scram-sha-256', '--encoding', 'UTF8', '--locale', 'C.UTF-8'],
	]);
	appendFileSync(join(files, 'postgresql.conf'), settings);
	runProgram(join(programs, 'postgres'), ['--single', '-D', files, 'postgres'], {
		input: `CREATE ROLE halfdigit LOGIN CREATEDB PASSWORD '${cluster.password}'\n`,
	});
	keep?.(cluster);
	renameSync(files, folder);
	rmSync(making, { recursive: true, force: true });
	return cluster;
}

/**
 * Throws away what starts that were killed left half-made. Their initdb may still run and write for a moment,
 * which is why each start works in a folder of its own name.
 * @param {string} folder
 */
function sweep(folder) {
	const beginning = `${basename(folder)}.making.`;
	const left = readdirSync(dirname(folder)).filter((name) => name.startsWith(beginning));
	for (const path of [folder, ...left.map((name) => join(dirname(folder), name))]) {
		rmSync(path, { recursive: true, force: true, maxRetries: 20, retryDelay: 100 });
	}
}

const settings = `
listen_addresses = '127.0.0.1'
unix_socket_directories = ''
max_connections = 200
password_encryption = 'scram-sha-256'
timezone = 'UTC'
log_timezone = 'UTC'
# Durability is PostgreSQL's default and stays on here: a saved edit must survive a crash.
fsync = on
full_page_writes = on
synchronous_commit = on
`;

/**
 * A folder of that name in `.data`, or one of the database user where it may not walk down to the clone.
 * @param {string} name
 */
export function chooseFolder(name) {
	const usual = inData(name);
	const user = databaseUser();
	if (!user) return usual;
	chmodSync(dataFolder, 0o755);
	const walk = spawnSync('test', ['-x', dataFolder], { ...user, cwd: '/' });
	if (walk.status === 0) return usual;
	const home = '/var/lib/postgresql';
	if (!existsSync(home)) {
		throw new Problem(
			`The system user "postgres" may not enter ${root}.\nMend: clone into a folder that others may enter, for example under /srv.`,
		);
	}
	const digest = createHash('sha256').update(root).digest('hex').slice(0, 12);
	return join(home, name === 'postgres' ? `halfdigit-${digest}` : `halfdigit-${digest}-${name}`);
}

/** @param {string} path */
function own(path) {
	const user = databaseUser();
	if (user) chownSync(path, user.uid, user.gid);
}

/** A password nobody types. */
export function secret() {
	return randomBytes(24).toString('hex');
}
