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

/** Column of the `#` that starts a comment; one inside a quoted text does not. */
function findComment(text: string): number {
	let quote = '';
	for (let i = 0; i < text.length; i++) {
		const char = text[i] as string;
		if (quote) {
			if (char === '\\') i++;
			else if (char === quote) quote = '';
		} else if (char === '"' || char === "'") quote = char;
		else if (char === '#') return i;
	}
	return text.length;
}

export interface Token {
	kind: 'plain' | 'call' | 'number' | 'string' | 'comment';
	text: string;
}

const parts =
	/(?<comment>#.*$)|(?<string>"(?:[^"\\]|\\.)*"?)|(?<call>[\p{L}_][\p{L}\p{N}_]*(?=\())|(?<word>[\p{L}_][\p{L}\p{N}_]*)|(?<number>(?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d+)?)/gu;

/** Cuts a formula into pieces of one colour; their texts joined are the formula. */
export function tokenize(text: string): Token[] {
	const tokens: Token[] = [];
	let at = 0;
	const plain = (to: number) => {
		if (to > at) tokens.push({ kind: 'plain', text: text.slice(at, to) });
	};
	for (const match of text.matchAll(parts)) {
		const { comment, string, call, number } = match.groups ?? {};
		const kind = comment ? 'comment' : string ? 'string' : call ? 'call' : number ? 'number' : null;
		if (!kind) continue;
		plain(match.index);
		tokens.push({ kind, text: match[0] });
		at = match.index + match[0].length;
	}
	plain(text.length);
	return tokens;
}
