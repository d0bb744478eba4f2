import katex from 'katex';
import { visibleInFormula as visible } from './glyphs';
import { readMathMl, type MathMl } from './mathml';

/** A formula as the typesetter's mathematics builds it. */
export type Formula =
	| { k: 'row' | 'fenced'; c: Formula[] }
	/** One character, set as a variable or sign in a style. */
	| { k: 'sign'; t: string; style: Style }
	| { k: 'words' | 'number' | 'name'; t: string }
	| { k: 'fraction' | 'stack' | 'root'; c: [Formula, Formula] }
	| { k: 'square root'; c: [Formula] }
	| { k: 'scripts' | 'limits'; base: Formula; low: Formula | null; high: Formula | null }
	| { k: 'accent'; base: Formula; t: string }
	| { k: 'table'; rows: Formula[][]; align: string[] }
	| { k: 'space'; em: number };

/** `usual`: a letter in italics, anything else upright. */
type Style = 'usual' | 'upright' | 'bold' | 'bb' | 'cal' | 'frak' | 'sans' | 'mono';

const styles: Readonly<Record<string, Style>> = {
	normal: 'upright',
	bold: 'bold',
	'bold-italic': 'bold',
	'double-struck': 'bb',
	script: 'cal',
	fraktur: 'frak',
	'sans-serif': 'sans',
	monospace: 'mono',
};

const bounds = {
	/** Characters of TeX; the engine's formulas are the longest. */
	length: 6000,
	/** Levels; the typesetter's own bound is not far above. */
	depth: 16,
	parts: 3000,
};

/** Accents as MathML writes them, by what the typesetter calls them. */
const accents: Readonly<Record<string, string>> = {
	'^': 'hat',
	ˆ: 'hat',
	'~': 'tilde',
	'˜': 'tilde',
	ˉ: 'macron',
	'¯': 'macron',
	'˙': 'dot',
	'¨': 'dot.double',
	ˊ: 'acute',
	ˋ: 'grave',
	'˘': 'breve',
	ˇ: 'caron',
	'⃗': 'arrow',
	'→': 'arrow',
	'˚': 'circle',
};

const invisible = /^[\u2061-\u2064\u200b]*$/;
const spaces: Readonly<Record<string, number>> = {
	'\u2009': 0.167,
	'\u200a': 0.1,
	'\u2005\u200a': 0.278,
	'\u2004\u200a': 0.278,
	'\u2003': 1,
};

/** A formula in TeX as a tree; undefined where it is too long, too deep, or KaTeX does not take it. */
export function formulaOf(tex: string, ownLine: boolean): Formula | undefined {
	if (tex.length > bounds.length) return undefined;
	const source = mathMlOf(tex, ownLine);
	const math = source?.slice(source.indexOf('<math'), source.lastIndexOf('</math>') + 7);
	const read = math === undefined ? undefined : readMathMl(math);
	if (read === undefined) return undefined;
	const budget = { left: bounds.parts };
	return build(read, 0, budget);
}

function mathMlOf(tex: string, displayMode: boolean): string | undefined {
	try {
		return katex.renderToString(tex, {
			displayMode,
			output: 'mathml',
			trust: false,
			strict: 'ignore',
			throwOnError: true,
			maxExpand: 200,
			maxSize: 10,
		});
	} catch (error) {
		// Nesting without end takes all of the stack.
		if (error instanceof katex.ParseError || error instanceof RangeError) return undefined;
		throw error;
	}
}

const isLeaf = new Set(['mi', 'mo', 'mn', 'mtext']);

type Budget = { left: number };

/** Undefined for the whole formula as soon as one part is too deep or unknown. */
function build(node: MathMl, depth: number, budget: Budget): Formula | undefined {
	budget.left -= 1;
	if (depth > bounds.depth || budget.left < 0) return undefined;
	if (typeof node === 'string') return { k: 'words', t: visible(node) };
	const { tag, attributes, children } = node;
	const text = children.filter((child) => typeof child === 'string').join('');
	const parts = (): Formula[] | undefined => every(children, depth + 1, budget);
	// KaTeX also puts whole formulas where a sign is usual.
	if (isLeaf.has(tag) && children.some((child) => typeof child !== 'string'))
		return row(node, depth, budget);
	switch (tag) {
		case 'math':
		case 'semantics':
			return children[0] === undefined ? undefined : build(children[0], depth, budget);
		case 'mi':
			return letter(text, attributes);
		case 'mo':
			return sign(text);
		case 'mn':
			return { k: 'number', t: visible(text) };
		case 'mtext':
			return /^\s*$/.test(text) && text !== ''
				? { k: 'space', em: spaces[text] ?? 0.278 * text.length }
				: { k: 'words', t: visible(text) };
		case 'mspace':
			return { k: 'space', em: widthOf(attributes.width) };
		case 'mphantom':
			return { k: 'space', em: 0 };
		case 'mrow':
		case 'mstyle':
		case 'mpadded':
		case 'menclose':
		case 'mtd':
			return row(node, depth, budget);
		case 'mfrac': {
			const two = pair(parts());
			return two && { k: attributes.linethickness === '0px' ? 'stack' : 'fraction', c: two };
		}
		case 'msqrt': {
			const inner = parts();
			return inner && { k: 'square root', c: [joined(inner)] };
		}
		case 'mroot': {
			const two = pair(parts());
			return two && { k: 'root', c: two };
		}
		case 'msub':
		case 'msup':
		case 'msubsup':
		case 'munder':
		case 'mover':
		case 'munderover':
			return attached(tag, parts(), children);
		case 'mtable':
			return table(node, depth, budget);
		default:
			return undefined;
	}
}

function every(nodes: MathMl[], depth: number, budget: Budget): Formula[] | undefined {
	const built: Formula[] = [];
	for (const node of nodes) {
		const part = build(node, depth, budget);
		if (!part) return undefined;
		built.push(part);
	}
	return built;
}

/** A row of one part is that part, so that the tree is no deeper than the formula. */
function joined(parts: Formula[]): Formula {
	return parts.length === 1 ? parts[0]! : { k: 'row', c: parts };
}

function pair(parts: Formula[] | undefined): [Formula, Formula] | undefined {
	const [first, second] = parts ?? [];
	return first && second && [first, second];
}

function row(
	{ children }: Exclude<MathMl, string>,
	depth: number,
	budget: Budget,
): Formula | undefined {
	const parts = every(children, children.length === 1 ? depth : depth + 1, budget);
	if (!parts) return undefined;
	const [first] = children;
	const fenced = typeof first === 'object' && first.attributes.fence === 'true';
	return fenced && parts.length > 1 ? { k: 'fenced', c: parts } : joined(parts);
}

function letter(text: string, { mathvariant }: Readonly<Record<string, string>>): Formula {
	const shown = visible(text);
	if ([...shown].length !== 1) return { k: 'name', t: shown };
	return {
		k: 'sign',
		t: shown,
		style: mathvariant ? (styles[mathvariant] ?? 'upright') : 'usual',
	};
}

function sign(text: string): Formula {
	if (invisible.test(text)) return { k: 'space', em: 0 };
	const shown = visible(text);
	return [...shown].length === 1
		? { k: 'sign', t: shown, style: 'usual' }
		: { k: 'words', t: shown };
}

function attached(
	tag: string,
	parts: Formula[] | undefined,
	children: MathMl[],
): Formula | undefined {
	const [base, first, second] = parts ?? [];
	if (!base || !first) return undefined;
	const mark = tag === 'mover' || tag === 'munder' ? markOf(tag, children[1]) : undefined;
	if (mark !== undefined) return { k: 'accent', base, t: mark };
	const k = tag.startsWith('ms') ? 'scripts' : 'limits';
	const over = tag === 'msup' || tag === 'mover';
	return { k, base, low: over ? null : first, high: over ? first : (second ?? null) };
}

/** What the typesetter calls an accent, or a line or brace along the base. */
function markOf(tag: string, mark: MathMl | undefined): string | undefined {
	if (typeof mark !== 'object' || mark.tag !== 'mo') return undefined;
	const text = mark.children.filter((child) => typeof child === 'string').join('');
	const isLine = text === '‾' || text === '―' || text === '_';
	if (tag === 'munder') return isLine ? 'underline' : text === '⏟' ? 'underbrace' : undefined;
	if (isLine) return 'overline';
	if (text === '⏞') return 'overbrace';
	return Object.hasOwn(accents, text) ? accents[text] : undefined;
}

function table(
	{ children, attributes }: Exclude<MathMl, string>,
	depth: number,
	budget: Budget,
): Formula | undefined {
	const rows: Formula[][] = [];
	for (const line of children) {
		if (typeof line === 'string') return undefined;
		const cells = every(line.children, depth + 1, budget);
		if (!cells) return undefined;
		rows.push(cells);
	}
	const align = (attributes.columnalign ?? '').split(' ').filter(Boolean);
	return { k: 'table', rows, align };
}

function widthOf(width = ''): number {
	const em = Number(/^(-?[\d.]+)em$/.exec(width)?.[1] ?? 0);
	return Number.isFinite(em) ? Math.max(-1, Math.min(4, em)) : 0;
}
