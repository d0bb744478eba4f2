import { build } from './build.mjs';
import { installPackages, missingPackages } from './debian.mjs';
import { ensureNodePackages } from './node-packages.mjs';
import { start } from './postgres.mjs';
import { step } from './progress.mjs';

/**
 * Everything that must be there before something can run: Debian's packages and a started PostgreSQL on one side,
 * Node.js packages and the build on the other, at once.
 * @param {import('./debian.mjs').Package[]} packages
 */
export async function setUp(packages) {
	const missing = missingPackages(packages);
	const results = await Promise.allSettled([
		(async () => {
			if (missing.length > 0) await step('Debian packages', () => installPackages(missing));
			await step('PostgreSQL', async () => {
				const { started, port } = await start({ owned: true });
				return `${started ? 'started' : 'runs already'} on 127.0.0.1:${port}`;
			});
		})(),
		(async () => {
			await step('Node.js packages', ensureNodePackages);
			await build();
		})(),
	]);
	for (const result of results) {
		if (result.status === 'rejected') throw result.reason;
	}
}
