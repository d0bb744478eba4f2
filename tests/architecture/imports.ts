import { dirname, join } from 'node:path/posix';
import ts from 'typescript';
import type { Sources } from './sources';

export interface Import {
	from: string;
	line: number;
	/** As it is written. */
	specifier: string;
	/** The file it means; undefined for a package or a module that the framework makes. */
	target: string | undefined;
	typeOnly: boolean;
}

/** Every import, re-export and `import()` of the sources, of `.svelte` script blocks too. */
export function findImports(sources: Sources): Import[] {
	return [...sources].flatMap(([from, text]) => {
		const file = parse(from, text);
		const found: Import[] = [];
		const visit = (node: ts.Node): void => {
			const named = specifierOf(node);
			if (named) {
				const line = file.getLineAndCharacterOfPosition(node.getStart(file)).line + 1;
				found.push({ ...named, from, line, target: resolve(from, named.specifier, sources) });
			}
			ts.forEachChild(node, visit);
		};
		visit(file);
		return found;
	});
}

/** The syntax tree of a module; of a `.svelte` file its script blocks, on the lines where they stand. */
export function parse(path: string, text: string): ts.SourceFile {
	const code = path.endsWith('.svelte') ? scriptsOf(text) : text;
	return ts.createSourceFile(path, code, ts.ScriptTarget.Latest, false, ts.ScriptKind.TS);
}

function scriptsOf(text: string): string {
	let code = '';
	let end = 0;
	for (const match of text.matchAll(/<script[^>]*>([\s\S]*?)<\/script>/g)) {
		const start = match.index + match[0].indexOf('>') + 1;
		code += blank(text.slice(end, start)) + (match[1] ?? '');
		end = start + (match[1] ?? '').length;
	}
	return code;
}

function blank(text: string): string {
	return text.replace(/[^\n]/g, ' ');
}

function specifierOf(node: ts.Node): Pick<Import, 'specifier' | 'typeOnly'> | undefined {
	if (ts.isImportDeclaration(node)) {
		return literal(node.moduleSpecifier, isTypeOnlyClause(node.importClause));
	}
	if (ts.isExportDeclaration(node)) return literal(node.moduleSpecifier, node.isTypeOnly);
	if (ts.isCallExpression(node) && node.expression.kind === ts.SyntaxKind.ImportKeyword) {
		return literal(node.arguments[0], false);
	}
	if (ts.isImportTypeNode(node) && ts.isLiteralTypeNode(node.argument)) {
		return literal(node.argument.literal, true);
	}
	return undefined;
}

function literal(
	node: ts.Node | undefined,
	typeOnly: boolean,
): Pick<Import, 'specifier' | 'typeOnly'> | undefined {
	return node && ts.isStringLiteralLike(node) ? { specifier: node.text, typeOnly } : undefined;
}

function isTypeOnlyClause(clause: ts.ImportClause | undefined): boolean {
	if (!clause) return false;
	if (clause.phaseModifier === ts.SyntaxKind.TypeKeyword) return true;
	const named = clause.namedBindings;
	if (clause.name || !named || !ts.isNamedImports(named)) return false;
	return named.elements.length > 0 && named.elements.every((element) => element.isTypeOnly);
}

function resolve(from: string, specifier: string, sources: Sources): string | undefined {
	const path = specifier.startsWith('$lib/')
		? `src/lib/${specifier.slice(5)}`
		: specifier.startsWith('.')
			? join(dirname(from), specifier)
			: undefined;
	if (path === undefined) return undefined;
	const ends = ['', '.ts', '.svelte', '.svelte.ts', '/index.ts'];
	return ends.map((end) => path + end).find((candidate) => sources.has(candidate)) ?? path;
}
