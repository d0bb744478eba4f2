import { describe, expect, test } from 'vitest';
import { findImports } from './imports';
import { breaches } from './rules';
import { findBarrels, findCircle, findVagueFolders } from './shape';
import { modules, paths } from './sources';

const project = new Map(
	[...modules('src', 'server')].filter(([path]) => !path.endsWith('.test.ts')),
);
const imports = findImports(project);

describe('the project', () => {
	test('has sources to look at', () => {
		expect(project.size).toBeGreaterThan(40);
	});

	test('imports only what each folder may', () => {
		expect(breaches(imports)).toEqual([]);
	});

	test('has no circle of imports', () => {
		expect(findCircle(imports)).toBeUndefined();
	});

	test('has no file that only passes on what others export', () => {
		expect(findBarrels(project)).toEqual([]);
	});

	test('has no folder with a name that says nothing', () => {
		expect(findVagueFolders(paths('src', 'server', 'tests'))).toEqual([]);
	});
});

describe('the import rules', () => {
	test.each([
		['src/lib/errors.ts', `import { z } from 'zod';`],
		['src/lib/calc/evaluate.ts', `import { readFileSync } from 'node:fs';`],
		['src/lib/calc/evaluate.ts', `import * as Y from 'yjs';`],
		['src/lib/calc/evaluate.ts', `import { toCells } from '$lib/note/document';`],
		['src/lib/note/document.ts', `import { evaluate } from '$lib/calc/evaluate';`],
		['src/lib/schemas/notes.ts', `import { db } from '$lib/server/db/client';`],
		[
			'src/lib/components/Seal.svelte',
			`<script>\n\timport { db } from '$lib/server/db/client';\n</script>`,
		],
		['src/lib/client/threads.svelte.ts', `import type { Actor } from '$lib/server/auth/access';`],
		['src/lib/server/notes/notes.ts', `import { redirect } from '@sveltejs/kit';`],
		['src/lib/server/notes/notes.ts', `import { env } from '$env/dynamic/private';`],
		['src/lib/server/notes/notes.ts', `import { SvelteKitAuth } from '@auth/sveltekit';`],
		['src/lib/server/notes/notes.ts', `import { form } from '$lib/server/web/form';`],
		['src/lib/server/notes/notes.ts', `import { Threads } from '$lib/client/threads.svelte';`],
		[
			'src/routes/(app)/notes/+page.svelte',
			`<script lang="ts">import { db } from '$lib/server/db/client';</script>`,
		],
		['src/routes/(app)/notes/+page.ts', `import * as notes from '$lib/server/notes/notes';`],
		[
			'src/routes/(app)/notes/rows.ts',
			`export const load = () => import('$lib/server/notes/notes');`,
		],
		['src/hooks.server.ts', `import { rooms } from '../server/sync/rooms';`],
		['src/lib/server/notes/notes.ts', `export { rooms } from '../../../../server/sync/rooms';`],
		['server/sync/room.ts', `import { handle } from '$lib/server/web/auth';`],
		['server/sync/room.ts', `import { Threads } from '$lib/client/threads.svelte';`],
		['server/main.ts', `import { start } from './local/postgres.mjs';`],
		['src/lib/server/notes/notes.ts', `import { AppError } from '../../errors';`],
		['src/lib/note/document.ts', `let value: import('$lib/server/env').Settings;`],
	])('forbid in %s: %s', (path, text) => {
		expect(breaches(findImports(new Map([[path, text]])))).toHaveLength(1);
	});

	test.each([
		['src/lib/note/document.ts', `import type { Cell } from '$lib/calc/results';`],
		['src/lib/note/document.ts', `import { type Cell } from '$lib/calc/results';`],
		['src/lib/server/notes/notes.ts', `import { db } from '../db/client';`],
		['src/routes/(app)/notes/+page.server.ts', `import * as notes from '$lib/server/notes/notes';`],
		['src/routes/api/notes/+server.ts', `import * as notes from '$lib/server/notes/notes';`],
		['server/sync/room.ts', `import * as updates from '$lib/server/notes/updates';`],
	])('allow in %s: %s', (path, text) => {
		expect(breaches(findImports(new Map([[path, text]])))).toEqual([]);
	});

	test('name the line of a script block of a component', () => {
		const text = '<p>Hello</p>\n\n<script lang="ts">\n\timport pg from "pg";\n</script>';
		expect(breaches(findImports(new Map([['src/lib/components/A.svelte', text]])))).toEqual([
			'src/lib/components/A.svelte:4 imports pg, which its folder may not',
		]);
	});
});

describe('the shape rules', () => {
	test('find a circle through three files', () => {
		const sources = new Map([
			['src/lib/calc/a.ts', `import './b';`],
			['src/lib/calc/b.ts', `export const c = () => import('$lib/calc/c');`],
			['src/lib/calc/c.ts', `export { a } from './a';`],
		]);
		expect(findCircle(findImports(sources))).toEqual([
			'src/lib/calc/a.ts',
			'src/lib/calc/b.ts',
			'src/lib/calc/c.ts',
			'src/lib/calc/a.ts',
		]);
	});

	test('find no circle where two files share a third, or only types go round', () => {
		const sources = new Map([
			['src/lib/calc/a.ts', `import './b'; import './c';`],
			['src/lib/calc/b.ts', `import './c'; import type { A } from './a';`],
			['src/lib/calc/c.ts', ''],
		]);
		expect(findCircle(findImports(sources))).toBeUndefined();
	});

	test('tell a file that only passes on from one that has something of its own', () => {
		const sources = new Map([
			['src/lib/calc/all.ts', `import './a';\nexport * from './a';`],
			['src/lib/calc/own.ts', `export * from './a';\nexport const own = 1;`],
		]);
		expect(findBarrels(sources)).toEqual(['src/lib/calc/all.ts']);
	});

	test('find vague folder names at any depth', () => {
		const found = findVagueFolders([
			'src/lib/utils/a.ts',
			'server/helpers/b.ts',
			'src/lib/note/c.ts',
		]);
		expect(found).toEqual(['src/lib/utils/a.ts', 'server/helpers/b.ts']);
	});
});
