import { readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import ts from 'typescript';

const methods = ['GET', 'POST', 'PUT', 'PATCH', 'DELETE'];

/** Everything the routes answer to, read from their files: "GET /notes", "POST /notes?/create", "PATCH /api/…". */
export function answeredRoutes(folder = 'src/routes', address = ''): string[] {
	const entries = readdirSync(folder, { withFileTypes: true });
	const names = entries.map((entry) => entry.name);
	const here = address || '/';
	const found: string[] = [];
	if (names.includes('+page.svelte') || names.includes('+page.server.ts'))
		found.push(`GET ${here}`);
	for (const name of names.filter((name) => name === '+page.server.ts' || name === '+server.ts')) {
		const source = readFileSync(join(folder, name), 'utf8');
		found.push(...exportsOf(source).map((made) => made.replace(' ', ` ${here}`)));
	}
	for (const entry of entries.filter((entry) => entry.isDirectory())) {
		const part = /^\(.*\)$/.test(entry.name) ? '' : `/${entry.name.replace(/=\w+\]/, ']')}`;
		found.push(...answeredRoutes(join(folder, entry.name), address + part));
	}
	return found.sort();
}

/** "GET " and the like for the methods of a `+server.ts`, "POST ?/name" for the actions of a page. */
function exportsOf(source: string): string[] {
	const file = ts.createSourceFile('route.ts', source, ts.ScriptTarget.Latest, true);
	const found: string[] = [];
	for (const statement of file.statements) {
		if (ts.isFunctionDeclaration(statement) && statement.name) {
			if (methods.includes(statement.name.text)) found.push(`${statement.name.text} `);
		}
		if (!ts.isVariableStatement(statement)) continue;
		for (const { name, initializer } of statement.declarationList.declarations) {
			if (methods.includes(name.getText())) found.push(`${name.getText()} `);
			if (name.getText() === 'actions' && initializer) found.push(...actionsOf(initializer));
		}
	}
	return found;
}

function actionsOf(initializer: ts.Expression): string[] {
	if (!ts.isObjectLiteralExpression(initializer)) throw new Error('actions are no plain object');
	return initializer.properties.map((property) => {
		const name = property.name?.getText() ?? '';
		return name === 'default' ? 'POST ' : `POST ?/${name}`;
	});
}
