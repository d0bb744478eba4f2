import katex from 'katex';

/** Longest formula that is set; a longer one is shown as it was typed. */
const longest = 1_000;
/** Formulas that are remembered, so that a new figure does not set all others anew. */
const most = 400;
const known = new Map<string, string | undefined>();

/** HTML and MathML of a formula in TeX; undefined where it is too long or KaTeX does not take it. */
export function render(tex: string, ownLine: boolean): string | undefined {
	if (tex.length > longest) return undefined;
	const key = `${ownLine ? '$$' : '$'}${tex}`;
	if (known.has(key)) return known.get(key);
	if (known.size >= most) known.clear();
	const html = set(tex, ownLine);
	known.set(key, html);
	return html;
}

function set(tex: string, displayMode: boolean): string | undefined {
	try {
		return katex.renderToString(tex, {
			displayMode,
			output: 'htmlAndMathml',
			trust: false,
			strict: 'ignore',
			throwOnError: true,
			// KaTeX's own red is hard to read on the dark sheet.
			errorColor: 'var(--fail)',
			maxExpand: 100,
			maxSize: 10,
		});
	} catch (error) {
		// Nesting without end takes all of the stack.
		if (error instanceof katex.ParseError || error instanceof RangeError) return undefined;
		throw error;
	}
}
