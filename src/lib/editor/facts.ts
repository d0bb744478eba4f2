import type { Vocabulary } from '$lib/calc/language/vocabulary';
import { canonical } from '$lib/calc/language/characters';
import type { Evaluation } from '$lib/calc/results';
import { splitLine } from '$lib/components/lines';
import type { NoteCell } from '$lib/note/document';
import { definitionOf, parametersOf, quotedNames, wordsOf, type Definition } from './uses';
import { unitOf } from './vocabulary';

/** What is to be said of a word: what it is, its value or its use, and where it comes from. */
export interface Fact {
	name: string;
	/** What kind of word it is. */
	what: string;
	value?: string;
	formula?: string;
	/** A sentence of help, or the comment of its line. */
	about?: string;
	example?: { source: string; result: string };
	definition?: Definition;
}

interface Known {
	cells: readonly NoteCell[];
	evaluation: Evaluation;
	words: Vocabulary;
}

/** A word at a place of a cell's source. */
export interface Found {
	from: number;
	to: number;
	name: string;
	kind: 'name' | 'call' | 'unit';
	/** Set where the line itself gives the word to a function as its value. */
	parameter: boolean;
}

/** The word that stands at an offset of a cell's source. */
export function wordAt(kind: NoteCell['kind'], source: string, at: number): Found | undefined {
	if (kind === 'text') {
		const quoted = quotedNames(source).find(({ from, to }) => from <= at && at <= to);
		return quoted && { ...quoted, kind: 'name', parameter: false };
	}
	const start = source.lastIndexOf('\n', at - 1) + 1;
	const end = source.indexOf('\n', at);
	const line = source.slice(start, end < 0 ? source.length : end);
	const word = wordsOf(line).find(({ from, to }) => start + from <= at && at <= start + to);
	if (!word) return undefined;
	return {
		from: start + word.from,
		to: start + word.to,
		name: word.text,
		kind: word.kind,
		parameter:
			word.from !== splitLine(line).nameFrom && parametersOf(line).includes(canonical(word.text)),
	};
}

/** What is known of a word; undefined where nothing is. */
export function factOf({ name, kind, parameter }: Found, known: Known): Fact | undefined {
	const { words, cells, evaluation } = known;
	const unit = kind === 'unit' ? unitOf(words, name) : undefined;
	if (unit) return { name: unit.label, what: 'unit', about: unit.name };
	if (parameter) return { name, what: 'value that this function is given' };
	const definition = definitionOf(cells, name);
	if (definition) return quantityFact(name, definition, evaluation);
	return wordFact(name, words);
}

function quantityFact(name: string, definition: Definition, { quantities }: Evaluation): Fact {
	const { kind, formulaFrom, formulaTo, commentFrom } = splitLine(definition.text);
	const quantity = Object.hasOwn(quantities, name) ? quantities[name] : undefined;
	const about = definition.text.slice(commentFrom + 1).trim();
	return {
		name,
		what: kind === 'function' ? 'function of this note' : 'quantity',
		...(quantity && { value: quantity.readout.text }),
		...(kind === 'function' && {
			value: definition.text.slice(0, formulaFrom).replace(/\s*=\s*$/, ''),
		}),
		formula: definition.text.slice(formulaFrom, formulaTo),
		...(about !== '' && { about }),
		definition,
	};
}

/** What is known of a word of the language itself. */
export function wordFact(name: string, words: Vocabulary): Fact | undefined {
	const fn = Object.hasOwn(words.functions, name) ? words.functions[name] : undefined;
	if (fn) {
		const { signature, help, example, result } = fn;
		return {
			name,
			what: 'function',
			value: signature,
			about: help,
			example: { source: example, result },
		};
	}
	const constant = Object.hasOwn(words.constants, name) ? words.constants[name] : undefined;
	if (constant) return { name, what: 'constant', value: constant.value };
	const series = Object.hasOwn(words.series, name) ? words.series[name] : undefined;
	if (series) return { name, what: `preferred values, ${series.members} in a decade (IEC 60063)` };
	const unit = unitOf(words, name);
	return unit && { name: unit.label, what: 'unit', about: unit.name };
}
