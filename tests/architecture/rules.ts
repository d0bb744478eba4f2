import type { Import } from './imports';

interface Rule {
	/** Beginning of the paths the rule is for; the first rule that fits a file counts. */
	who: RegExp;
	/** Files it may import. */
	files: RegExp;
	/** Files of which it may import types. */
	types?: RegExp;
	/** Packages, and modules that the framework makes. */
	packages: RegExp;
}

const foundation = 'src/lib/(errors\\.ts|calc/|note/|protocol/|schemas/)';
const serverPackages =
	/^(node:|drizzle-orm|pg$|pino$|zod$|yjs$|lib0\/|y-protocols\/|canonicalize$|diff$|@node-rs\/argon2$|@zxcvbn-ts\/|katex$|uqr$|nodemailer\/lib\/)/;

/** Who may import whom, as DEVELOPERS.md explains it. Tests are outside these rules. */
const rules: readonly Rule[] = [
	{ who: /^src\/lib\/errors\.ts$/, files: /^$/, packages: /^$/ },
	{
		who: /^src\/lib\/calc\//,
		files: /^src\/lib\/(errors\.ts|calc\/)/,
		packages: /^(mathjs$|@stdlib\/)/,
	},
	{
		who: /^src\/lib\/(note|protocol|schemas)\//,
		files: /^src\/lib\/(errors\.ts|note\/|protocol\/|schemas\/)/,
		types: /^src\/lib\/calc\//,
		packages: /^(yjs|zod|lib0\/.+|fractional-indexing)$/,
	},
	{
		who: /^src\/lib\/(editor|client|components)\//,
		files: new RegExp(`^(${foundation}|src/lib/(editor|client|components)/)`),
		packages:
			/^(svelte(\/.+)?|\$app\/.+|@codemirror\/.+|@lezer\/.+|codemirror|y-codemirror\.next|y-websocket|y-protocols\/.+|yjs|lib0\/.+|zod|markdown-it|mathjs|katex(\/.+)?)$/,
	},
	{
		who: /^src\/lib\/server\/web\//,
		files: new RegExp(`^(${foundation}|src/lib/server/)`),
		packages: new RegExp(`${serverPackages.source}|^(@sveltejs/kit|@auth/|\\$app/|\\$env/)`),
	},
	{
		// Paper and mail say what the page says: how text, lines, days and seals are read comes from one place.
		who: /^src\/lib\/server\/(paper|mail)\//,
		files: new RegExp(`^(${foundation}|src/lib/server/(?!web/)|src/lib/components/[a-z-]+\\.ts$)`),
		packages: serverPackages,
	},
	{
		who: /^src\/lib\/server\//,
		files: new RegExp(`^(${foundation}|src/lib/server/(?!web/))`),
		packages: serverPackages,
	},
	{
		who: /^src\/(hooks\.server\.ts$|app\.d\.ts$|routes\/(.*\/)?\+([^/]+\.)?server\.ts$)/,
		files: /^src\/(lib|routes)\//,
		packages: /^(@sveltejs\/kit|\$app\/|\.?\.?\/\$types|zod$)/,
	},
	{
		who: /^src\//,
		files: /^src\/(lib\/(?!server\/)|routes\/|app\.css$|[^/]+\.css$)/,
		packages:
			/^(@sveltejs\/kit|\$app\/|svelte|\.?\.?\/\$types|@codemirror\/|@fontsource\/|@dagrejs\/dagre$|katex\/dist\/katex\.min\.css$)/,
	},
	{
		who: /^server\/local\//,
		files: new RegExp(
			`^(${foundation}|src/lib/server/(?!web/)|server/local/|server/jobs/queues\\.ts$)`,
		),
		packages:
			/^(node:|drizzle-orm|pg$|esbuild$|yjs$|@playwright\/test$|mathjs$|mailparser$|smtp-server$)/,
	},
	{
		who: /^server\//,
		files: new RegExp(`^(${foundation}|src/lib/server/(?!web/)|server/(?!local/))`),
		packages:
			/^(node:|ws$|yjs$|lib0\/|y-protocols\/|pino$|zod$|pg$|pg-boss$|@myriaddreamin\/typst-ts-node-compiler$|\.\/typesetting\/[a-z]+\.typ$)/,
	},
];

/** A sentence for each import that its file's rule does not allow, or that is written the wrong way. */
export function breaches(imports: readonly Import[]): string[] {
	return imports.flatMap((one) => {
		const rule = rules.find(({ who }) => who.test(one.from));
		const place = `${one.from}:${one.line} imports ${one.specifier}`;
		if (!rule) return [];
		const named = one.target ?? one.specifier;
		const isFile = one.target !== undefined && !named.endsWith('/$types');
		const allowed = isFile
			? rule.files.test(named) || (one.typeOnly && rule.types?.test(named) === true)
			: rule.packages.test(one.specifier);
		if (!allowed) return [`${place}, which its folder may not`];
		return isFile && leavesItsFolder(one) ? [`${place}; across folders it is written $lib/…`] : [];
	});
}

function leavesItsFolder({ from, specifier, target }: Import): boolean {
	if (!specifier.startsWith('.') || !target?.startsWith('src/lib/')) return false;
	return areaOf(from) !== areaOf(target);
}

function areaOf(path: string): string {
	return path.split('/').slice(0, 3).join('/');
}
