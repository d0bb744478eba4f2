import { createHash } from 'node:crypto';
import { existsSync, readFileSync, readdirSync, rmSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { pathToFileURL } from 'node:url';
import { must } from './commands.mjs';
import { root } from './place.mjs';
import { report } from './problem.mjs';
import { step } from './progress.mjs';

const sources = ['src', 'server', 'static', 'package-lock.json', 'vite.config.ts'];
const settings = ['svelte.config.js', 'tsconfig.json'];
const digestFile = join(root, 'build', 'sources.sha256');

/** Builds pages and server programs into `build/`, unless they were built from exactly these sources. */
export async function build() {
	const digest = digestOf([...sources, ...settings]);
	if (existsSync(digestFile) && readFileSync(digestFile, 'utf8') === digest) {
		await step('Build', () => 'unchanged');
		return;
	}
	rmSync(digestFile, { force: true });
	await step('Build the pages', async () => {
		// NODE_ENV decides how Svelte compiles; whatever the caller has set must not reach a production build.
		await must('node', ['node_modules/vite/bin/vite.js', 'build'], {
			env: { NODE_ENV: 'production' },
		});
	});
	await step('Build the server', async () => {
		const { bundle } = await import('./bundle.mjs');
		await bundle();
	});
	writeFileSync(digestFile, digest);
}

/** @param {string[]} places */
function digestOf(places) {
	const hash = createHash('sha256').update(process.version);
	for (const place of places) {
		for (const file of filesOf(place))
			hash.update(`\n${file}\n`).update(readFileSync(join(root, file)));
	}
	return hash.digest('hex');
}

/**
 * @param {string} place
 * @returns {string[]}
 */
function filesOf(place) {
	const entries = readdirSyncOrNone(place);
	if (!entries) return [place];
	return entries
		.sort((a, b) => (a.name < b.name ? -1 : 1))
		.flatMap((entry) => {
			const path = join(place, entry.name);
			return entry.isDirectory() ? filesOf(path) : [path];
		});
}

/** @param {string} place */
function readdirSyncOrNone(place) {
	try {
		return readdirSync(join(root, place), { withFileTypes: true });
	} catch (error) {
		if (/** @type {NodeJS.ErrnoException} */ (error).code === 'ENOTDIR') return undefined;
		throw error;
	}
}

if (import.meta.url === pathToFileURL(process.argv[1] ?? '').href) {
	try {
		await build();
	} catch (error) {
		report(error);
		process.exitCode = 1;
	}
}
