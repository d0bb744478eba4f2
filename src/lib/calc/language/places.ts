import { Trouble } from '../trouble';
import type { Node, Place } from './nodes';
import type { Token } from './tokens';

const operatorWords = new Set(['mod', 'to', 'in', 'and', 'or', 'xor', 'not']);

/** Where the parts of a line stand. mathjs's tree carries no columns; its leaves come in the order of the tokens. */
export class Places {
	#next: number;
	readonly #starts: ReadonlyMap<number, number>;
	readonly #ends: ReadonlyMap<number, number>;

	constructor(
		private readonly tokens: readonly Token[],
		start: number,
	) {
		this.#next = start;
		this.#starts = new Map(tokens.map((token, i) => [token.from, i]));
		this.#ends = new Map(tokens.map((token, i) => [token.to, i]));
	}

	/** The token that begins at a column. */
	at(from: number): Token | undefined {
		return this.tokens[this.#starts.get(from) ?? -1];
	}

	/** The token before the one that begins at a column. */
	before(from: number): Token | undefined {
		return this.tokens[(this.#starts.get(from) ?? 0) - 1];
	}

	endsInBracket(node: Place): boolean {
		return /^[)\]]$/.test(this.tokens[this.#ends.get(node.to) ?? -1]?.text ?? '');
	}

	/** The token of the next leaf; operator words between leaves are passed over. */
	leaf(name?: string): Token {
		for (;;) {
			const token = this.tokens[this.#next++];
			if (!token) throw new Trouble('syntax', this.line(), 'This line cannot be read.');
			if (
				token.kind === 'number' ||
				token.kind === 'text' ||
				(token.kind === 'word' && (token.text === name || !operatorWords.has(token.text)))
			)
				return token;
		}
	}

	/** The node with so many tokens more before and behind it. */
	widened<T extends Node>(node: T, before: number, after: number): T {
		const first = this.tokens[(this.#starts.get(node.from) ?? 0) - before];
		const last = this.tokens[(this.#ends.get(node.to) ?? 0) + after];
		return { ...node, from: first?.from ?? node.from, to: last?.to ?? node.to };
	}

	/** End of a call, from its last value or its name. */
	closing(last: Node | undefined, name: Token): number {
		if (last) return this.closeAfter(last.to);
		return this.tokens[(this.#starts.get(name.from) ?? 0) + 2]?.to ?? name.to;
	}

	/** End of the first closing bracket from `to` on; a trailing comma or semicolon may stand before it. */
	closeAfter(to: number): number {
		return this.tokens.find((token) => token.from >= to && /^[)\]]$/.test(token.text))?.to ?? to;
	}

	/** Start of the brackets of a list that open before its first member. */
	openBefore(from: number): number {
		const index = this.#starts.get(from) ?? 0;
		let first = index;
		while (this.tokens[first - 1]?.text === '[') first -= 1;
		return this.tokens[first]?.from ?? from;
	}

	/** The whole line. */
	line(): Place {
		const next = this.tokens[Math.min(this.#next, this.tokens.length - 1)];
		return {
			from: this.tokens[0]?.from ?? 0,
			to: Math.max(next?.to ?? 1, this.tokens.at(-1)?.to ?? 1),
		};
	}
}
