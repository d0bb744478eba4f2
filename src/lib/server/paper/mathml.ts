/** An element of MathML, or the text in it. */
export type MathMl =
	{ tag: string; attributes: Readonly<Record<string, string>>; children: MathMl[] } | string;

const token = /<(\/?)([a-z]+)((?:\s+[a-zA-Z:]+="[^"]*")*)\s*(\/?)>|([^<]+)/g;
const attribute = /([a-zA-Z:]+)="([^"]*)"/g;
const entities: Readonly<Record<string, string>> = {
	'&amp;': '&',
	'&lt;': '<',
	'&gt;': '>',
	'&quot;': '"',
	'&#x27;': "'",
};

/** Reads the MathML that KaTeX writes: well-formed, without comments, and five entities. Undefined for anything else. */
export function readMathMl(source: string): MathMl | undefined {
	const root: Exclude<MathMl, string> = { tag: '', attributes: {}, children: [] };
	const open = [root];
	let end = 0;
	for (const match of source.matchAll(token)) {
		if (match.index !== end) return undefined;
		end += match[0].length;
		const [, closes, tag = '', written = '', empty, text] = match;
		const parent = open.at(-1)!;
		if (text !== undefined) parent.children.push(plain(text));
		else if (closes) {
			if (open.length < 2 || parent.tag !== tag) return undefined;
			open.pop();
		} else {
			const attributes = Object.fromEntries(
				[...written.matchAll(attribute)].map(([, name = '', value = '']) => [name, plain(value)]),
			);
			const element = { tag, attributes, children: [] };
			parent.children.push(element);
			if (!empty) open.push(element);
		}
	}
	return end === source.length && open.length === 1 ? root.children[0] : undefined;
}

function plain(text: string): string {
	return text.replace(/&(?:amp|lt|gt|quot|#x27);/g, (entity) => entities[entity] ?? entity);
}
