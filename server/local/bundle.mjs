import * as esbuild from 'esbuild';
import { root } from './place.mjs';

/** What runs beside the pages, as it is named in `build/`. */
const entries = {
	main: 'server/main.ts',
	evaluator: 'server/evaluator.ts',
	migrate: 'server/local/migrate.ts',
	demonstration: 'server/local/demonstration.ts',
};

/** @typedef {keyof typeof entries} Entry */

const all = /** @type {Entry[]} */ (Object.keys(entries));

/**
 * Bundles server programs into `build/`.
 * @param {Entry[]} [names]
 */
export async function bundle(names = all) {
	await esbuild.build(options(names));
}

/**
 * Bundles them and does so again at each change, until the process ends.
 * @param {Entry[]} names
 */
export async function watch(names) {
	await esbuild.build(options(names));
	const context = await esbuild.context(options(names));
	await context.watch();
}

/**
 * Packages stay outside, and so do the built pages; `$lib` comes from the TypeScript settings.
 * @param {Entry[]} names
 * @returns {esbuild.BuildOptions}
 */
function options(names) {
	return {
		absWorkingDir: root,
		entryPoints: Object.fromEntries(names.map((name) => [name, entries[name]])),
		outdir: 'build',
		bundle: true,
		platform: 'node',
		format: 'esm',
		target: 'node20',
		packages: 'external',
		external: ['./web/*'],
		sourcemap: true,
		logLevel: 'warning',
	};
}
