import { bounds } from '../bounds';
import { Trouble } from '../trouble';
import { asTyped, isNameCharacter } from './characters';
import type { Place } from './nodes';

export interface Token extends Place {
	kind: 'number' | 'word' | 'sign' | 'text';
	text: string;
}

const number = /0[xbo][0-9a-fA-F.]+|(?:\d+\.?(?![*/^])\d*|\d+|\.\d+)(?:[eE][+-]?\d+)?/y;
/** No escapes, and nothing that is not seen. */
const quoted = /"([^"\\\p{Cc}\p{Cf}\p{Cs}]*)"/uy;
const sign = /\.[*/^]|[<>=!]=|[-+*/^()[\],:;<>=!?]/y;

/** The raised digits, by what is written for them. */
const raised = '⁰¹²³⁴⁵⁶⁷⁸⁹⁻';
const written: Readonly<Record<string, string>> = { '≤': '<=', '≥': '>=', '{': '(', '}': ')' };

const refused: readonly [test: RegExp, message: string, mend?: string][] = [
	[
		/^"[^"]*$/,
		'This text in quotes has no end.',
		'Add the closing `"`; a `#` cannot be part of it.',
	],
	[/^"/, 'Text in quotes holds plain characters only, no `\\`.'],
	[
		/^['`\u2018\u2019]/,
		'This quotation mark has no meaning in a formula.',
		'Write text between double quotes, `"4k7"`, or a comment behind `#`.',
	],
	[/^[{}]/, 'Braces have no meaning in a formula.', 'Group with round brackets.'],
	[/^\.(?![\d*/^])/, 'A point stands only inside a number.'],
	[
		/^[&|~]|^<<|^>>/,
		'Operations on bits are not part of formulas.',
		'Use `and`, `or` and `not` for conditions.',
	],
	[/^\?[.?]/, 'This operator is not part of formulas.'],
	[/^[≤]/, '`≤` is written `<=`.', 'Write `<=`.'],
	[/^[≥]/, '`≥` is written `>=`.', 'Write `>=`.'],
	[/^[±]/, '`±` is not an operator.'],
	[/^[√]/, '`√` is written `sqrt(…)`.', 'Write `sqrt(…)`.'],
	[/^[²³⁰¹⁴-⁹⁻]/, 'A raised digit is written with `^`.', 'Write `^2` for a square, say.'],
];

/** Cuts a prepared line into tokens. Throws Trouble on what no formula may hold and on nesting beyond the bound. */
export function tokenize(line: string): Token[] {
	const tokens: Token[] = [];
	let at = 0;
	while (at < line.length) {
		const c = line[at] ?? '';
		if (c === ' ' || c === '\t' || c === '\u00a0') {
			at += 1;
			continue;
		}
		const token = numberAt(line, at) ?? wordAt(line, at) ?? textAt(line, at) ?? signAt(line, at);
		if (!token) throw refusal(line, at);
		tokens.push(token);
		at = token.to;
	}
	checkNesting(tokens);
	return tokens;
}

function numberAt(line: string, from: number): Token | undefined {
	number.lastIndex = from;
	const text = number.exec(line)?.[0];
	return text === undefined ? undefined : { kind: 'number', text, from, to: from + text.length };
}

function wordAt(line: string, from: number): Token | undefined {
	let to = from;
	while (
		to < line.length &&
		(isNameCharacter(line[to] ?? '') || (to > from && /\d/.test(line[to] ?? '')))
	)
		to += 1;
	return to === from ? undefined : { kind: 'word', text: line.slice(from, to), from, to };
}

function textAt(line: string, from: number): Token | undefined {
	quoted.lastIndex = from;
	const found = quoted.exec(line);
	if (!found) return undefined;
	const [text, inner = ''] = found;
	const to = from + text.length;
	if (inner.length <= bounds.textLength) return { kind: 'text', text, from, to };
	throw new Trouble(
		'tooLarge',
		{ from, to },
		`A text in quotes has at most ${bounds.textLength} characters.`,
		{ mend: 'Shorten it, or write a comment behind `#`.' },
	);
}

function signAt(line: string, from: number): Token | undefined {
	sign.lastIndex = from;
	const rest = line.slice(from, from + 2);
	if (refused.some(([test]) => test.test(rest))) return undefined;
	const text = sign.exec(line)?.[0];
	return text === undefined ? undefined : { kind: 'sign', text, from, to: from + text.length };
}

function refusal(line: string, from: number): Trouble {
	const rest = line.slice(from);
	const character = String.fromCodePoint(rest.codePointAt(0) ?? 0);
	const place = { from, to: from + character.length };
	const rule = refused.find(([test]) => test.test(rest));
	if (!rule)
		return new Trouble('syntax', place, `\`${asTyped(character)}\` has no meaning in a formula.`);
	const [, message, mend] = rule;
	const powers = new RegExp(`^[${raised}]+`).exec(rest)?.[0];
	const replacement = powers ? `^${lowered(powers)}` : written[character];
	return new Trouble(
		/quot|Braces|point|bits|operator/.test(message) ? 'notAllowed' : 'syntax',
		powers ? { from, to: from + powers.length } : place,
		message,
		{ ...(mend !== undefined && { mend }), ...(replacement !== undefined && { replacement }) },
	);
}

function lowered(powers: string): string {
	return Array.from(powers, (digit) => '0123456789-'[raised.indexOf(digit)]).join('');
}

/** mathjs descends once per bracket, sign, power and choice; the bound keeps it from running out of stack. */
function checkNesting(tokens: Token[]): void {
	let depth = 0;
	let chain = 0;
	let choices = 0;
	for (const [i, token] of tokens.entries()) {
		if (token.text === '(' || token.text === '[') depth += 1;
		if (token.text === ')' || token.text === ']') depth -= 1;
		if (token.text === '?' || token.text === '=') choices += 1;
		const operand = token.kind !== 'sign';
		const prefix = /^[-+]$|^not$/.test(token.text) && (i === 0 || tokens[i - 1]?.kind === 'sign');
		if (/^\.?\^$/.test(token.text) || prefix || token.text === 'not') chain += 1;
		else if (!operand && token.text !== '(' && token.text !== ')') chain = 0;
		if (depth > bounds.nesting || chain > bounds.nesting || choices > bounds.nesting)
			throw new Trouble(
				'tooDeep',
				token,
				`Nested too deeply: a line goes at most ${bounds.nesting} levels deep.`,
				{ mend: 'Split the line into several quantities.' },
			);
	}
}

/** The unmatched bracket that a "missing bracket" is about, and what would close it. */
export function unclosed(tokens: Token[]): { token: Token; closing: string } | undefined {
	const open: Token[] = [];
	for (const token of tokens) {
		if (token.text === '(' || token.text === '[') open.push(token);
		if (token.text === ')' || token.text === ']') open.pop();
	}
	const token = open.at(-1);
	return token && { token, closing: token.text === '(' ? ')' : ']' };
}
