import { typeset } from '$lib/calc/symbol';
import { tokenize, type LineParts, type Token } from './lines';
import { escapeHtml } from './markdown';

/*
 * Lines as HTML, safe to put into a page: all that was written is escaped. A component for each piece of each line would
 * make a long note slow to open.
 */

/** A formula, or a line of requirements or curves, with its pieces in their colours; a blank one has the height of a line. */
export function formulaHtml(source: string): string {
	return source.trim() === '' ? `${source}<br>` : tokenize(source).map(pieceHtml).join('');
}

function pieceHtml({ kind, text }: Token): string {
	const piece = escapeHtml(text);
	return kind === 'plain' || kind === 'name' ? piece : `<span class="tk-${kind}">${piece}</span>`;
}

/** A worked line: the name it defines typeset, its formula behind. The same pieces as in an editor. */
export function workedHtml(text: string, { name, nameTo, formulaFrom }: LineParts): string {
	if (name === undefined) return formulaHtml(text);
	const { glyph, sub } = typeset(name);
	const below = sub && `<span class="sym-sub">${escapeHtml(sub)}</span>`;
	const parameters = text.slice(nameTo, text.lastIndexOf('=', formulaFrom)).trimEnd();
	const symbol = escapeHtml(glyph) + below + escapeHtml(parameters);
	const formula = tokenize(text.slice(formulaFrom)).map(pieceHtml).join('');
	return `<span class="line-name">${symbol}<span class="sym-eq"> = </span></span>${formula}`;
}
