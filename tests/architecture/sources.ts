import { readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';

/** Source text by its path from the root of the project, written with `/`. */
export type Sources = ReadonlyMap<string, string>;

const notOurs = new Set(['node_modules', 'build', '.svelte-kit', '.data', 'test-results', '.git']);

/** Every file of the project that git may hold, below one of these folders (the whole project when none is named). */
export function paths(...folders: string[]): string[] {
	return (folders.length > 0 ? folders : ['']).flatMap(walk).sort();
}

/** The text of those files that can import something. */
export function modules(...folders: string[]): Sources {
	const found = paths(...folders).filter((path) => /\.(ts|js|mjs|svelte)$/.test(path));
	return new Map(found.map((path) => [path, readFileSync(path, 'utf8')]));
}

function walk(folder: string): string[] {
	return readdirSync(folder || '.', { withFileTypes: true }).flatMap((entry) => {
		const path = folder ? join(folder, entry.name) : entry.name;
		if (entry.isDirectory()) return notOurs.has(entry.name) ? [] : walk(path);
		return isIgnored(entry.name) ? [] : [path];
	});
}

function isIgnored(name: string): boolean {
	return name.endsWith('.log') || (/^\.env(\.|$)/.test(name) && name !== '.env.example');
}
