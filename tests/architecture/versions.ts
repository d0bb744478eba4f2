/** The part of `package-lock.json` that is read here. */
export interface Lock {
	packages: Record<string, { version?: string }>;
}

/** Versions below these have known weaknesses or faults that reach this product. */
const atLeast: Record<string, string> = {
	'@auth/core': '0.41.3',
	'@sveltejs/kit': '2.69.1',
	svelte: '5.55.7',
	devalue: '5.6.3',
	ws: '8.21.1',
	mathjs: '15.2.0',
	'markdown-it': '14.2.0',
	'linkify-it': '5.0.2',
	katex: '0.16.21',
	'drizzle-orm': '0.45.2',
	nodemailer: '9.1.0',
	yjs: '13.6.0',
	'y-protocols': '1.0.7',
};

/** Two copies of one of these in a process do not work together. */
const single = ['yjs', 'lib0', 'y-protocols', '@auth/core'];

/** A sentence for each copy that is too old and each package that is there more than once. */
export function findOutdated(lock: Lock): string[] {
	const old = Object.entries(atLeast).flatMap(([name, least]) =>
		copies(lock, name)
			.filter((version) => isBelow(version, least))
			.map((version) => `${name} ${version} is older than ${least}`),
	);
	const doubled = single
		.filter((name) => copies(lock, name).length > 1)
		.map((name) => `${name} is there more than once: ${copies(lock, name).join(', ')}`);
	return [...old, ...doubled];
}

/** The version of each copy of a package. */
export function copies(lock: Lock, name: string): string[] {
	return Object.entries(lock.packages)
		.filter(([path]) => path === `node_modules/${name}` || path.endsWith(`/node_modules/${name}`))
		.map(([, { version = '0.0.0' }]) => version);
}

function isBelow(version: string, least: string): boolean {
	const [a, b] = [version, least].map(
		(text) => text.split(/[-+]/)[0]?.split('.').map(Number) ?? [],
	);
	for (let place = 0; place < 3; place++) {
		const difference = (a?.[place] ?? 0) - (b?.[place] ?? 0);
		if (difference !== 0) return difference < 0;
	}
	// A version before the release itself.
	return version.includes('-');
}
