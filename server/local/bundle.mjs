import * as esbuild from 'esbuild';
import { root } from './place.mjs';

/** What runs beside the pages, as it is named in `build/`. */
const entries = {
	main: 'server/main.ts',
	evaluator: 'server/evaluator.ts',
	typesetter: 'server/typesetter.ts',
	migrate: 'server/local/migrate.ts',
	restored: 'server/restored.ts',
	demonstration: 'server/local/demonstration.ts',
	verify: 'server/verify.ts',
	'signing-key': 'server/signing-key.ts',
};

/** @typedef {keyof typeof entries} Entry */

const all = /** @type {Entry[]} */ (Object.keys(entries));

/**
 * Bundles server programs into `build/`.
 * @param {Entry[]} [names]
 */
export async function bundle(names = all) {
	for (const group of groups(names)) await esbuild.build(options(group));
}

/**
 * Bundles them and does so again at each change, until the process ends.
 * @param {Entry[]} names
 */
export async function watch(names) {
	for (const group of groups(names)) {
		await esbuild.build(options(group));
		const context = await esbuild.context(options(group));
		await context.watch();
	}
}

/**
 * Each child's program is bundled for itself, with its packages.
 * @param {Entry[]} names
 */
function groups(names) {
	const children = names.filter(isChild).map((name) => [name]);
	const others = names.filter((name) => !isChild(name));
	return [...children, others].filter((group) => group.length > 0);
}

/** @param {Entry} name */
function isChild(name) {
	return name === 'evaluator' || name === 'typesetter';
}

/** A bundled CommonJS package asks for Node.js's own modules with `require`, which a module does not have by itself. */
const requireOfNode =
	"import { createRequire } from 'node:module';\nconst require = createRequire(import.meta.url);";

/**
 * Packages stay outside, and so do the built pages; `$lib` comes from the TypeScript settings. Children start often
 * and use a small part of large packages, so that these are bundled into theirs, but for compiled code and fonts.
 * @param {Entry[]} names
 * @returns {esbuild.BuildOptions}
 */
export function options(names) {
	const whole = names.some(isChild);
	return {
		absWorkingDir: root,
		entryPoints: Object.fromEntries(names.map((name) => [name, entries[name]])),
		outdir: 'build',
		bundle: true,
		platform: 'node',
		format: 'esm',
		target: 'node20',
		packages: whole ? 'bundle' : 'external',
		...(whole && { banner: { js: requireOfNode } }),
		external: ['./web/*', '@myriaddreamin/*', '@expo-google-fonts/*'],
		loader: { '.typ': 'text' },
		sourcemap: true,
		logLevel: 'warning',
	};
}
