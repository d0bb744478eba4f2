/** How a line of a calculation cell is set. Offsets are UTF-16 columns of the line. */
export interface LineParts {
	kind: 'definition' | 'function' | 'expression' | 'comment' | 'blank';
	/** Defined name, without a function's parameters. */
	name?: string;
	nameFrom: number;
	nameTo: number;
	/** Where the formula starts, behind ` = ` and its spaces. */
	formulaFrom: number;
	/** Where the formula ends; spaces before a comment are outside. */
	formulaTo: number;
	/** Where the comment starts, the line's length where it has none. */
	commentFrom: number;
}

const definition = /^(\s*)([\p{L}_][\p{L}\p{N}_]*)(\s*\([^()=]*\))?(\s*=(?!=)\s*)/u;

/** Splits a line into name, formula and comment for display. The engine alone decides what it means. */
export function splitLine(text: string): LineParts {
	const commentFrom = findComment(text);
	const code = text.slice(0, commentFrom);
	const formulaTo = code.trimEnd().length;
	const bare = { nameFrom: 0, nameTo: 0, formulaFrom: 0, formulaTo, commentFrom };
	if (formulaTo === 0) return { kind: commentFrom < text.length ? 'comment' : 'blank', ...bare };

	const match = definition.exec(code);
	if (!match) return { kind: 'expression', ...bare };
	const [whole, space = '', name = '', parameters = ''] = match;
	return {
		kind: parameters ? 'function' : 'definition',
		name,
		nameFrom: space.length,
		nameTo: space.length + name.length,
		formulaFrom: whole.length,
		formulaTo: Math.max(formulaTo, whole.length),
		commentFrom,
	};
}

/** Column of the `#` that starts a comment, also inside a quoted text, as the engine reads it. */
function findComment(text: string): number {
	const at = text.indexOf('#');
	return at < 0 ? text.length : at;
}

export interface Token {
	kind: 'plain' | 'name' | 'call' | 'number' | 'unit' | 'string' | 'comment';
	text: string;
}

const parts =
	/(?<comment>#.*$)|(?<string>"[^"#]*"?)|(?<call>[\p{L}_][\p{L}\p{N}_]*(?=\())|(?<word>[\p{L}_°%][\p{L}\p{N}_]*)|(?<number>(?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d+)?)/gu;

/** Cuts a formula into pieces; their texts joined are the formula. A word right behind a number is its unit. */
export function tokenize(text: string): Token[] {
	const tokens: Token[] = [];
	let at = 0;
	for (const match of text.matchAll(parts)) {
		if (match.index > at) tokens.push({ kind: 'plain', text: text.slice(at, match.index) });
		tokens.push({ kind: kindOf(match.groups ?? {}, tokens), text: match[0] });
		at = match.index + match[0].length;
	}
	if (at < text.length) tokens.push({ kind: 'plain', text: text.slice(at) });
	return tokens;
}

function kindOf(
	found: Record<string, string | undefined>,
	before: readonly Token[],
): Token['kind'] {
	const { comment, string, number, word } = found;
	if (comment !== undefined) return 'comment';
	if (string !== undefined) return 'string';
	if (number !== undefined) return 'number';
	if (word === undefined) return 'call';
	const last = before.at(-1);
	const neighbour = last?.kind === 'plain' && last.text.trim() === '' ? before.at(-2) : last;
	return neighbour?.kind === 'number' ? 'unit' : 'name';
}
