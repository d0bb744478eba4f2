import type * as M from 'mathjs';
import { bounds } from '../bounds';
import type { CurveFunction } from '../curve-function';
import { Trouble } from '../trouble';
import type { Unit } from '../units/unit';
import { asTyped, canonical, prepared } from './characters';
import { Lowering } from './lower';
import { mathjs } from './mathjs';
import {
	heightOf,
	isArithmetic,
	type Node,
	type Place,
	type Reference,
	type UnitBehindNumber,
} from './nodes';
import { syntaxTrouble } from './syntax-errors';
import { tokenize, type Token } from './tokens';

export interface Parameter extends Place {
	name: string;
	typed: string;
}

/** What one line says, apart from the note it stands in. */
export interface ParsedLine {
	kind: 'definition' | 'function' | 'expression' | 'comment' | 'blank';
	/** Known even where the formula is wrong, so that others wait for it instead of not knowing it. */
	defined?: Place & { name: string; typed: string };
	parameters: Parameter[];
	body?: Node;
	/** Levels of the formula's tree. */
	height: number;
	/** Whether it takes no time worth watching. */
	quick: boolean;
	references: Reference[];
	/** `5 C`: places of a number with the unit symbol behind it. */
	unitsBehindNumbers: UnitBehindNumber[];
	description?: string;
	trouble?: Trouble;
	/** A function that is no formula but a curve. */
	curve?: CurveFunction;
}

/** Characters of remembered lines. A parsed line takes some hundred bytes per character. */
const most = 300_000;
const cache = new Map<string, ParsedLine>();
let remembered = 0;

/** Whether a line needs no parsing, as it was parsed before. */
export function isRemembered(text: string): boolean {
	return cache.has(text);
}

/** Parses a line; never throws. Lines are remembered by their text, so that a keystroke parses one line. */
export function parseLine(text: string): ParsedLine {
	const known = cache.get(text);
	if (known) return known;
	const parsed = read(text);
	remembered += text.length + 20;
	if (remembered > most) {
		cache.clear();
		remembered = text.length;
	}
	cache.set(text, parsed);
	return parsed;
}

/** A line that must not be read, with the reason. The name it defines is known all the same. */
export function unreadLine(text: string, trouble: Trouble): ParsedLine {
	const start = headOf(text.slice(0, bounds.lineLength));
	return { ...empty, kind: start.kind, ...start.defined, trouble };
}

const empty = { height: 0, quick: true, parameters: [], references: [], unitsBehindNumbers: [] };

const head = /^(\s*)([\p{L}_$\u00b0\u00b5%][\p{L}\d_$\u00b0\u00b5%]*)\s*(\([^()]*\))?\s*=(?!=)/u;

/** The name before `=`, found without the grammar. */
function headOf(source: string): {
	kind: ParsedLine['kind'];
	defined?: Pick<ParsedLine, 'defined'>;
} {
	const found = head.exec(source);
	if (!found) return { kind: 'expression' };
	const typed = found[2] ?? '';
	const from = found[1]?.length ?? 0;
	const defined = { name: canonical(typed), typed, from, to: from + typed.length };
	return { kind: found[3] === undefined ? 'definition' : 'function', defined: { defined } };
}

function read(text: string): ParsedLine {
	if (text.length > bounds.lineLength) {
		const message = `The line has ${text.length} characters; ${bounds.lineLength} are possible.`;
		const at = { from: 0, to: text.length };
		const mend = 'Split it into several quantities.';
		return unreadLine(text, new Trouble('tooLarge', at, message, { mend }));
	}
	const comment = text.indexOf('#');
	const source = comment < 0 ? text : text.slice(0, comment);
	const description = comment < 0 ? '' : text.slice(comment + 1).trim();
	const described = description === '' ? {} : { description };
	if (source.trim() === '')
		return { ...empty, ...described, kind: comment < 0 ? 'blank' : 'comment' };
	const { kind, defined } = headOf(source);
	const base: ParsedLine = { ...empty, ...described, ...defined, kind };
	try {
		return { ...base, ...readFormula(prepared(source), kind) };
	} catch (error) {
		if (error instanceof Trouble) return { ...base, trouble: error };
		throw error;
	}
}

function readFormula(line: string, kind: ParsedLine['kind']): Partial<ParsedLine> {
	const tokens = tokenize(line);
	refuseOpenRanges(tokens);
	const tree = treeOf(line, tokens);
	if (tree.type === 'AssignmentNode' && kind === 'definition') {
		const assignment = tree as M.AssignmentNode;
		const lowering = new Lowering(tokens, new Set(), 1);
		return finished(lowering, lowering.value(assignment.value));
	}
	if (tree.type === 'FunctionAssignmentNode' && kind === 'function') {
		const assignment = tree as unknown as { params: string[]; expr: M.MathNode };
		const names = tokens
			.filter((token) => token.kind === 'word')
			.slice(1, 1 + assignment.params.length);
		const parameters = names.map(({ text, from, to }) => ({
			name: canonical(asTyped(text)),
			typed: asTyped(text),
			from,
			to,
		}));
		const start = tokens.findIndex((token) => token.text === '=') + 1;
		const lowering = new Lowering(tokens, new Set(parameters.map((p) => p.name)), start);
		return { parameters, ...finished(lowering, lowering.value(assignment.expr)) };
	}
	const lowering = new Lowering(tokens);
	return finished(lowering, lowering.value(tree));
}

function finished(lowering: Lowering, body: Node): Partial<ParsedLine> {
	const { references, unitsBehindNumbers } = lowering;
	return {
		body,
		references,
		unitsBehindNumbers,
		height: heightOf(body),
		quick: isArithmetic(body),
	};
}

function treeOf(line: string, tokens: Token[]): M.MathNode {
	try {
		return mathjs.parse(line);
	} catch (error) {
		throw syntaxTrouble(error, line, tokens);
	}
}

/** mathjs fills in the ends of `:` itself, which would stand at no place of the line. */
function refuseOpenRanges(tokens: Token[]): void {
	for (const [i, token] of tokens.entries()) {
		if (token.text !== ':') continue;
		const before = tokens[i - 1]?.text ?? '(';
		const after = tokens[i + 1]?.text ?? ')';
		if (/^[[(,;:?]$/.test(before) || /^[\]),;:]$/.test(after))
			throw new Trouble(
				'syntax',
				{ from: token.from, to: token.to },
				'A range needs a start and an end: `1:5`.',
			);
	}
}

/** A unit as typed behind a colon in a text, `mV`. Throws Trouble. */
export function parseUnit(text: string): Unit {
	const line = prepared(text);
	const tokens = tokenize(line);
	return new Lowering(tokens).unit(treeOf(line, tokens)).unit;
}
