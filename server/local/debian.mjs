import { existsSync, readFileSync, writeFileSync } from 'node:fs';
import { collect, must } from './commands.mjs';
import { findPrograms } from './postgres-programs.mjs';
import { Problem } from './problem.mjs';

/** Where Debian's package puts the browser of the tests. */
export const chromium = '/usr/bin/chromium';

/** @typedef {'postgresql' | 'chromium'} Package */

/** @type {Record<Package, () => boolean>} */
const present = {
	postgresql: () => findPrograms() !== undefined,
	chromium: () => existsSync(chromium),
};

/**
 * Which of these packages must be installed. Throws a Problem with the command that does it where we may not.
 * @param {Package[]} wanted
 */
export function missingPackages(wanted) {
	const missing = wanted.filter((name) => !present[name]());
	if (missing.length === 0) return missing;
	const command = `apt-get update && apt-get install -y ${missing.join(' ')}`;
	if (!existsSync('/usr/bin/apt-get')) {
		throw new Problem(
			`Missing: ${missing.join(', ')}, and this is no Debian system.\nInstall PostgreSQL under /usr/lib/postgresql and Chromium as ${chromium}; on Debian 12 the command is:\n  ${command}`,
		);
	}
	if (process.getuid?.() !== 0) {
		throw new Problem(
			`Missing: ${missing.join(', ')}. Run this command, then start again:\n  sudo sh -c '${command}'`,
		);
	}
	return missing;
}

/**
 * Installs Debian packages, as root.
 * @param {Package[]} missing
 * @returns {Promise<string>} a remark
 */
export async function installPackages(missing) {
	await apt('update');
	if (missing.includes('postgresql')) await withoutMainCluster(() => install(['postgresql']));
	if (missing.includes('chromium')) await install(['chromium']);
	return `installed ${missing.join(', ')}`;
}

/**
 * Programs that tests compare the engine with or look at PDFs with, and where Debian puts them. Without one what it is
 * for is left out, with a notice.
 */
const peers = {
	units: '/usr/bin/units',
	ngspice: '/usr/bin/ngspice',
	'poppler-utils': '/usr/bin/pdftotext',
	qpdf: '/usr/bin/qpdf',
	'python3-uncertainties': '/usr/lib/python3/dist-packages/uncertainties',
	// recommended by it, and without it there are no correlated values
	'python3-numpy': '/usr/lib/python3/dist-packages/numpy',
};

/** Shows what processes ask of the kernel. Without it the order of writing and answering is seen less closely. */
const tracer = { strace: '/usr/bin/strace' };

/**
 * Installs the programs to compare with where that is ours to do and possible.
 * @returns {Promise<string>} a remark
 */
export function installPeers() {
	return installOptional(peers);
}

/**
 * The same for the program that fault runs trace with.
 * @returns {Promise<string>} a remark
 */
export function installTracer() {
	return installOptional(tracer);
}

/** @param {Record<string, string>} programs */
async function installOptional(programs) {
	const missing = Object.entries(programs).flatMap(([name, path]) =>
		existsSync(path) ? [] : [name],
	);
	if (missing.length === 0) return 'all here';
	const left = `left out: ${missing.join(', ')}`;
	if (!existsSync('/usr/bin/apt-get') || process.getuid?.() !== 0) return left;
	try {
		await apt('update');
		await install(missing);
	} catch (error) {
		return `${left}; ${error instanceof Error ? error.message.split('\n')[0] : 'not to be had'}`;
	}
	return `installed ${missing.join(', ')}`;
}

const clusterSettings = '/etc/postgresql-common/createcluster.conf';

/**
 * Debian's package makes and starts a cluster of its own, which nobody here would use. Its setting is put back
 * afterwards: the machine is not ours.
 * @param {() => Promise<void>} work
 */
async function withoutMainCluster(work) {
	await install(['postgresql-common']);
	const before = readFileSync(clusterSettings, 'utf8');
	writeFileSync(clusterSettings, `${before}\ncreate_main_cluster = false\n`);
	try {
		await work();
	} finally {
		writeFileSync(clusterSettings, before);
	}
}

/** @param {string[]} names */
async function install(names) {
	const words = ['install', '-y', '--no-install-recommends', ...names];
	try {
		await apt(...words);
	} catch {
		// An installation that was cut off earlier is finished first.
		await collect('dpkg', ['--configure', '-a'], { env: quiet });
		await apt(...words);
	}
}

const quiet = { DEBIAN_FRONTEND: 'noninteractive', LC_ALL: 'C.UTF-8' };

/** @param {string[]} words */
async function apt(...words) {
	await must('apt-get', ['-q', '-o', 'DPkg::Lock::Timeout=300', ...words], { env: quiet });
}
