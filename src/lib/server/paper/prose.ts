import { figuresOf, type FindReadout } from '$lib/components/figures';
import { longestProse, tokensOf, type ProseToken } from '$lib/components/markdown';
import { withFigures } from '$lib/components/markdown-formulas';
import type { Evaluation } from '$lib/calc/results';
import type { NoteCell } from '$lib/note/document';
import { formulaOf, type Formula } from './formula';
import { visible } from './glyphs';

/** What stands within a line of text. */
export type Inline =
	| { k: 'text' | 'code'; t: string }
	| { k: 'strong' | 'emphasis' | 'strike'; c: Inline[] }
	| { k: 'link'; to: string; c: Inline[] }
	| { k: 'figure'; number: string; doubt: string; unit: string }
	| { k: 'formula'; formula: Formula; alt: string }
	| { k: 'break' };

/** What stands on lines of its own. */
export type Block =
	| { k: 'paragraph'; c: Inline[] }
	| { k: 'heading'; level: number; c: Inline[] }
	| { k: 'list'; ordered: boolean; start: number; items: Block[][] }
	| { k: 'quote'; c: Block[] }
	| { k: 'code'; t: string }
	| { k: 'formula'; formula: Formula; alt: string }
	| { k: 'table'; align: string[]; head: Inline[][]; rows: Inline[][][] }
	| { k: 'rule' };

/** Levels of lists, quotes and emphasis; what is deeper is set as if it stood on the last one. */
const deepest = 6;

/** A text cell as the typesetter sets it. Nothing a person wrote is read as markup but the Markdown that pages read too. */
export function proseOf(cell: NoteCell, evaluation: Evaluation): Block[] {
	if (cell.source.length > longestProse) return [{ k: 'code', t: visible(cell.source) }];
	const find = figuresOf(cell, evaluation);
	return new Reader(tokensOf(cell.source), find).blocks();
}

class Reader {
	readonly #tokens: readonly ProseToken[];
	readonly #find: FindReadout;
	#at = 0;

	constructor(tokens: readonly ProseToken[], find: FindReadout) {
		this.#tokens = tokens;
		this.#find = find;
	}

	/** Blocks up to a closing token of this type, or to the end. */
	blocks(until?: string, depth = 0): Block[] {
		const blocks: Block[] = [];
		for (let token = this.#next(); token; token = this.#next()) {
			if (token.type === until) break;
			const found = this.#block(token, depth);
			if (Array.isArray(found)) blocks.push(...found);
			else if (found) blocks.push(found);
		}
		return blocks;
	}

	#next(): ProseToken | undefined {
		return this.#tokens[this.#at++];
	}

	#block(token: ProseToken, depth: number): Block | Block[] | undefined {
		switch (token.type) {
			case 'paragraph_open':
				return { k: 'paragraph', c: this.#line('paragraph_close') };
			case 'heading_open': {
				const level = Number(token.tag.slice(1));
				return { k: 'heading', level, c: this.#line('heading_close') };
			}
			case 'bullet_list_open':
			case 'ordered_list_open':
				return this.#list(token, depth);
			case 'blockquote_open': {
				const inner = this.blocks('blockquote_close', depth + 1);
				return depth < deepest ? { k: 'quote', c: inner } : inner;
			}
			case 'fence':
			case 'code_block':
				return { k: 'code', t: visible(token.content.replace(/\n$/, '')) };
			case 'formula_block':
				return (
					this.#formula(token.content, true) ?? { k: 'code', t: visible(`$$${token.content}$$`) }
				);
			case 'table_open':
				return this.#table();
			case 'hr':
				return { k: 'rule' };
			case 'inline':
				return { k: 'paragraph', c: this.#inlines(token) };
			default:
				return undefined;
		}
	}

	#line(until: string): Inline[] {
		const inlines: Inline[] = [];
		for (let token = this.#next(); token && token.type !== until; token = this.#next())
			inlines.push(...this.#inlines(token));
		return inlines;
	}

	#list(open: ProseToken, depth: number): Block | Block[] {
		const ordered = open.type === 'ordered_list_open';
		const items: Block[][] = [];
		for (let token = this.#next(); token; token = this.#next()) {
			if (token.type === 'list_item_open') items.push(this.blocks('list_item_close', depth + 1));
			else break;
		}
		const start = Math.min(1_000_000_000, Number(open.attrGet('start') ?? 1));
		return depth < deepest ? { k: 'list', ordered, start, items } : items.flat();
	}

	#table(): Block {
		const align: string[] = [];
		const rows: Inline[][][] = [];
		for (let token = this.#next(); token && token.type !== 'table_close'; token = this.#next()) {
			if (token.type === 'tr_open') rows.push([]);
			if (token.type !== 'th_open' && token.type !== 'td_open') continue;
			if (token.type === 'th_open')
				align.push(/text-align:(\w+)/.exec(String(token.attrGet('style') ?? ''))?.[1] ?? 'left');
			rows.at(-1)?.push(this.#line(token.type.replace('open', 'close')));
		}
		return { k: 'table', align, head: rows[0] ?? [], rows: rows.slice(1) };
	}

	#inlines({ type, children, content }: ProseToken): Inline[] {
		if (type !== 'inline') return [];
		const top: Inline[] = [];
		const open: Inline[][] = [top];
		const add = (inline: Inline) => open.at(-1)?.push(inline);
		const enter = (make: (c: Inline[]) => Inline) => {
			const inner: Inline[] = open.length > deepest ? open.at(-1)! : [];
			if (open.length <= deepest) add(make(inner));
			open.push(inner);
		};
		for (const token of children ?? []) {
			switch (token.type) {
				case 'strong_open':
					enter((c) => ({ k: 'strong', c }));
					break;
				case 'em_open':
					enter((c) => ({ k: 'emphasis', c }));
					break;
				case 's_open':
					enter((c) => ({ k: 'strike', c }));
					break;
				case 'link_open': {
					const to = String(token.attrGet('href') ?? '');
					enter((c) => ({ k: 'link', to, c }));
					break;
				}
				case 'strong_close':
				case 'em_close':
				case 's_close':
				case 'link_close':
					open.pop();
					break;
				case 'softbreak':
					add({ k: 'text', t: ' ' });
					break;
				case 'hardbreak':
					add({ k: 'break' });
					break;
				case 'code_inline':
					add({ k: 'code', t: visible(token.content) });
					break;
				case 'figure':
					add(this.#figure(token.content));
					break;
				case 'formula':
					add(this.#inlineFormula(token));
					break;
				default:
					if (token.content !== '') add({ k: 'text', t: visible(token.content) });
			}
		}
		return children || content === '' ? top : [{ k: 'text', t: visible(content) }];
	}

	#figure(quoted: string): Inline {
		const readout = this.#find(quoted);
		if (!readout) return { k: 'code', t: visible(quoted) };
		const { number, doubt = '', unit } = readout;
		return { k: 'figure', number: visible(number), doubt: visible(doubt), unit: visible(unit) };
	}

	#inlineFormula({ content, markup }: ProseToken): Inline {
		return (
			this.#formula(content, markup === '$$') ?? {
				k: 'code',
				t: visible(`${markup}${content}${markup}`),
			}
		);
	}

	#formula(tex: string, ownLine: boolean) {
		const formula = formulaOf(withFigures(tex, this.#find), ownLine);
		return formula && { k: 'formula' as const, formula, alt: visible(tex) };
	}
}
