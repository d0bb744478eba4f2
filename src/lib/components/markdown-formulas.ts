import type { MarkdownIt, StateBlock } from 'markdown-it';
import { figurePattern, type FindReadout } from './figures';
import type { Typeset } from './tex.svelte';

/** Most characters of formulas that one text has set; those after stand as they were typed. */
const mostTex = 2_500;

/** `$x$` and `$$x$$` within a line. A dollar beside a space or before a digit is money. */
const inLine = /\$\$([^$\n]{1,1000})\$\$|\$(?!\s)((?:[^$\\\n]|\\.){1,1000}?)(?<!\s)\$(?!\d)/y;

const dollar = '$'.charCodeAt(0);

interface Env {
	find: FindReadout;
	typeset?: Typeset;
	/** Characters of formulas that were set so far. */
	spent?: number;
}

/** Formulas in TeX: within a line between dollars, on lines of their own between two pairs of them. */
export function formulas(md: MarkdownIt): void {
	const { escapeHtml } = md.utils;

	md.inline.ruler.before('escape', 'formula', (state, silent) => {
		inLine.lastIndex = state.pos;
		const match = inLine.exec(state.src);
		if (!match) return false;
		if (!silent) {
			const token = state.push('formula', '', 0);
			token.content = match[1] ?? match[2] ?? '';
			token.markup = match[1] === undefined ? '$' : '$$';
		}
		state.pos += match[0].length;
		return true;
	});

	md.block.ruler.before(
		'fence',
		'formulas',
		(state, from, end, silent) => {
			// Asked of every line of a table, so that it must be quick.
			if (state.src.charCodeAt(state.bMarks[from]! + state.tShift[from]!) !== dollar) return false;
			const first = lineOf(state, from);
			if (!first.startsWith('$$') || state.sCount[from]! - state.blkIndent >= 4) return false;
			let last = from;
			let found = /^\$\$[^$]+\$\$\s*$/.test(first);
			while (!found && last + 1 < end && lineOf(state, last + 1).trim() !== '') {
				last += 1;
				found = lineOf(state, last).trimEnd().endsWith('$$');
			}
			if (!found) return false;
			if (silent) return true;
			const token = state.push('formula_block', '', 0);
			const whole = state.getLines(from, last + 1, state.blkIndent, false).trim();
			token.content = whole.slice(2, -2).trim();
			token.map = [from, last + 1];
			state.line = last + 1;
			return true;
		},
		{ alt: ['paragraph', 'blockquote', 'list'] },
	);

	const html = (tex: string, ownLine: boolean, env: Env): string => {
		const written = ownLine ? `$$${tex}$$` : `$${tex}$`;
		env.spent = (env.spent ?? 0) + tex.length;
		const set =
			env.spent <= mostTex ? env.typeset?.(withFigures(tex, env.find), ownLine) : undefined;
		return set ?? `<code>${escapeHtml(written)}</code>`;
	};
	md.renderer.rules.formula = (tokens, index, _options, env) => {
		const { content = '', markup } = tokens[index] ?? {};
		return html(content, markup === '$$', env as unknown as Env);
	};
	// What is wider than the sheet scrolls inside itself.
	md.renderer.rules.formula_block = (tokens, index, _options, env) =>
		`<div class="table">${html(tokens[index]?.content ?? '', true, env as unknown as Env)}</div>\n`;
}

function lineOf({ src, bMarks, tShift, eMarks }: StateBlock, line: number): string {
	return src.slice((bMarks[line] ?? 0) + (tShift[line] ?? 0), eMarks[line]);
}

/** A quoted figure within a formula is its value. */
export function withFigures(tex: string, find: FindReadout): string {
	return tex.replace(new RegExp(figurePattern.source, 'g'), (quoted) => {
		const shown = find(quoted);
		if (!shown) return quoted;
		const { number, doubt, unit } = shown;
		const pm = doubt ? `\\pm ${plain(doubt)}` : '';
		return `{${plain(number)}${pm}${unit && `\\,${plain(unit)}`}}`;
	});
}

function plain(text: string): string {
	return `\\text{${text.replace(/[\\{}$^~]/g, '').replace(/[%#&_]/g, '\\$&')}}`;
}
