import type { Readout } from '$lib/calc/results';
import MarkdownIt from 'markdown-it';
import { figurePattern, quotedName, type FindReadout } from './figures';
import { formulas } from './markdown-formulas';
import type { Typeset } from './tex.svelte';

const md = MarkdownIt({ html: false, linkify: false, typographer: false, maxNesting: 24 });
export const { escapeHtml } = md.utils;

// A picture from elsewhere would tell its host who reads the note.
md.disable('image');
md.validateLink = (url) => /^(?:https?:\/\/|mailto:)/i.test(url.trim());

md.inline.ruler.before('escape', 'figure', (state, silent) => {
	figurePattern.lastIndex = state.pos;
	const match = figurePattern.exec(state.src);
	if (!match) return false;
	if (!silent) state.push('figure', '', 0).content = match[0];
	state.pos += match[0].length;
	return true;
});

md.use(formulas);

// The note's title is the page's first heading; those of the text come below it.
md.core.ruler.push('headings', (state) => {
	for (const token of state.tokens) {
		if (token.type === 'heading_open' || token.type === 'heading_close') {
			token.tag = `h${Math.min(4, Math.max(2, Number(token.tag.slice(1))))}`;
		}
	}
});

// A list's marks stand on the side where its script begins.
md.core.ruler.push('directions', (state) => {
	for (const token of state.tokens) {
		const { type } = token;
		if (type === 'bullet_list_open' || type === 'ordered_list_open') token.attrSet('dir', 'auto');
	}
});

md.renderer.rules.link_open = (tokens, index, options, _env, self) => {
	const token = tokens[index];
	token?.attrSet('rel', 'noopener noreferrer nofollow');
	token?.attrSet('target', '_blank');
	return self.renderToken(tokens, index, options);
};
md.renderer.rules.table_open = () => '<div class="table"><table>\n';
md.renderer.rules.table_close = () => '</table></div>\n';

md.renderer.rules.figure = (tokens, index, _options, env) => {
	const quoted = tokens[index]?.content ?? '';
	const readout = (env?.find as FindReadout)(quoted);
	if (!readout) return `<span class="no-readout">${escapeHtml(quoted)}</span>`;
	const name = escapeHtml(quotedName(quoted));
	const tried = readout.tried
		? ` <span class="text-tried" data-tried="${name}"><span class="tried-word">trial</span>${figureOf(readout.tried)}</span>`
		: '';
	return `<span class="readout" data-quantity="${name}">${figureOf(readout)}</span>${tried}`;
};

function figureOf(readout: Readout): string {
	const unit = readout.unit && `&nbsp;<span class="unit">${escapeHtml(readout.unit)}</span>`;
	const doubt = readout.doubt ? `&nbsp;<small>±&nbsp;${escapeHtml(readout.doubt)}</small>` : '';
	return escapeHtml(readout.number) + doubt + unit;
}

/** A longer text is shown as it was typed: parsing a hostile one would hold up everybody who opens the note. */
export const longestProse = 30_000;

/**
 * HTML of a text cell, safe to put into a page: no HTML of the writer's, no pictures, links to the web and mail only.
 * Formulas stand as they were typed where nothing sets them.
 */
export function toHtml(source: string, find: FindReadout, typeset?: Typeset): string {
	if (source.length > longestProse) {
		return `<p><em>Too long to be set as text (more than 30 000 characters):</em></p>\n<pre>${escapeHtml(source)}</pre>\n`;
	}
	return md.render(source, { find, typeset });
}

export type ProseToken = ReturnType<typeof md.parse>[number];

/** A text cell as markdown-it reads it, for what sets it in another way than as HTML. */
export function tokensOf(source: string): ProseToken[] {
	return md.parse(source, {});
}

export interface Heading {
	/** 2 to 4. */
	level: number;
	text: string;
}

/** Headings of a text cell as plain text, quoted figures in their place. */
export function headingsOf(source: string, find: FindReadout): Heading[] {
	if (source.length > longestProse) return [];
	const tokens = md.parse(source, { find });
	return tokens.flatMap((token, index) => {
		if (token.type !== 'heading_open') return [];
		const parts = tokens[index + 1]?.children ?? [];
		const text = parts
			.map((part) =>
				part.type === 'figure' ? (find(part.content)?.text ?? part.content) : part.content,
			)
			.join('');
		return [{ level: Number(token.tag.slice(1)), text }];
	});
}
