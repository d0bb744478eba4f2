import katex from 'katex';

/** HTML and MathML of a formula in TeX; null where KaTeX does not take it. */
export function typeset(tex: string): string | null {
	try {
		return katex.renderToString(tex, {
			displayMode: true,
			output: 'htmlAndMathml',
			trust: false,
			strict: 'ignore',
			throwOnError: true,
			maxExpand: 200,
			maxSize: 20,
		});
	} catch (error) {
		if (error instanceof katex.ParseError) return null;
		throw error;
	}
}
