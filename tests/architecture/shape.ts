import ts from 'typescript';
import { parse, type Import } from './imports';
import type { Sources } from './sources';

/** One circle of imports, as the files it goes through, or undefined when there is none. */
export function findCircle(imports: readonly Import[]): string[] | undefined {
	const next = new Map<string, string[]>();
	for (const { from, target, typeOnly } of imports) {
		if (target && !typeOnly) next.set(from, [...(next.get(from) ?? []), target]);
	}
	const done = new Set<string>();
	const path: string[] = [];
	const visit = (file: string): string[] | undefined => {
		const seen = path.indexOf(file);
		if (seen >= 0) return [...path.slice(seen), file];
		if (done.has(file)) return undefined;
		path.push(file);
		for (const target of next.get(file) ?? []) {
			const circle = visit(target);
			if (circle) return circle;
		}
		path.pop();
		done.add(file);
		return undefined;
	};
	for (const file of next.keys()) {
		const circle = visit(file);
		if (circle) return circle;
	}
	return undefined;
}

/** Files that only pass on what other files export; the engine's door may. */
export function findBarrels(sources: Sources): string[] {
	return [...sources.keys()].filter((path) => {
		if (path === 'src/lib/calc/evaluate.ts' || path.endsWith('.svelte')) return false;
		const { statements } = parse(path, sources.get(path) ?? '');
		const passedOn = statements.filter(
			(one) => ts.isExportDeclaration(one) && one.moduleSpecifier !== undefined,
		);
		return passedOn.length > 0 && statements.every((one) => isPassing(one));
	});
}

function isPassing(statement: ts.Statement): boolean {
	return ts.isExportDeclaration(statement) || ts.isImportDeclaration(statement);
}

const vagueNames = /(^|\/)(utils?|helpers?|common|types|managers?|misc)\//;

/** Paths with a folder whose name says nothing about what is in it. */
export function findVagueFolders(paths: readonly string[]): string[] {
	return paths.filter((path) => vagueNames.test(path));
}
