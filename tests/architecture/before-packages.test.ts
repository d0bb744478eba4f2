import { readFileSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { expect, test } from 'vitest';

/** Static imports of a program in JavaScript, as Node.js resolves them before its first line runs. */
const importsOf = (path: string) =>
	[
		...readFileSync(path, 'utf8').matchAll(
			/^(?:import|export)\s(?:[^'";(]*?\sfrom\s)?['"]([^'"]+)['"]/gm,
		),
	].map(([, specifier = '']) => specifier);

/** Everything that a program imports, and what that imports. */
function allImportsOf(entry: string): string[] {
	const files = new Set([entry]);
	const packages: string[] = [];
	for (const file of files) {
		for (const specifier of importsOf(file)) {
			if (specifier.startsWith('.')) files.add(join(dirname(file), specifier));
			else if (!specifier.startsWith('node:')) packages.push(`${file} imports ${specifier}`);
		}
	}
	expect(files.size).toBeGreaterThan(5);
	return packages;
}

test.each(['demo', 'test', 'bench', 'faults'])(
	'%s.mjs begins in a fresh clone, where no package is installed yet',
	(name) => {
		expect(allImportsOf(`server/local/${name}.mjs`)).toEqual([]);
	},
);

test('the check finds a package behind other files', () => {
	expect(allImportsOf('server/local/serve-tests.mjs').join()).toContain('imports mailparser');
});
