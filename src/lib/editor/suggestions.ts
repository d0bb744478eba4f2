import type { Vocabulary } from '$lib/calc/language/vocabulary';
import type { Evaluation } from '$lib/calc/results';
import { splitLine, tokenize } from '$lib/components/lines';
import type { NoteCell } from '$lib/note/document';
import { parametersOf } from './uses';

/** A word that may be meant at the cursor. */
export interface Suggestion {
	/** What typing is compared with. */
	name: string;
	kind: 'quantity' | 'function' | 'unit' | 'constant';
	/** As it is shown and written, where that is not the name. */
	label?: string;
	/** Shown beside it: value, signature, spoken name. */
	detail: string;
	/** Written behind it. */
	ending?: string;
}

interface Suggestions {
	/** Where the word at the cursor begins. */
	from: number;
	list: readonly Suggestion[];
}

interface Around {
	kind: NoteCell['kind'];
	/** The cursor's line up to the cursor, and all of it. */
	before: string;
	line: string;
	cells: readonly NoteCell[];
	evaluation: Evaluation;
	words: Vocabulary;
	/** Asked for with a key, not only by typing. */
	asked: boolean;
}

const wordPattern = /[\p{L}_°%][\p{L}\p{N}_]*$/u;

/** What may stand at the cursor; undefined where nothing is offered. `from` is a column of the line. */
export function suggestionsAt(around: Around): Suggestions | undefined {
	if (around.kind === 'text') return inText(around);
	return (around.kind === 'curve' && inCurve(around)) || inFormula(around);
}

function inText({ before, line, cells, evaluation, words }: Around): Suggestions | undefined {
	const quoted = /\{\{\s*(?<name>[^{}:]*)(?<unit>:\s*[^{}]*)?$/.exec(before);
	if (!quoted) return undefined;
	const typed = wordPattern.exec(before)?.[0] ?? '';
	const from = before.length - typed.length;
	if (quoted.groups?.unit !== undefined) return { from, list: unitsOf(words) };
	const ending = line.slice(before.length).startsWith('}}') ? '' : '}}';
	return { from, list: quantitiesOf(cells, evaluation).map((one) => ({ ...one, ending })) };
}

function inFormula(around: Around): Suggestions | undefined {
	const { kind, before, line, cells, evaluation, words, asked } = around;
	const pieces = tokenize(before);
	const last = pieces.at(-1)?.kind;
	if (last === 'comment' || (last === 'string' && !/^".*"$/.test(pieces.at(-1)?.text ?? '')))
		return undefined;
	const typed = wordPattern.exec(before)?.[0] ?? '';
	if (typed === '' && !asked) return undefined;
	const from = before.length - typed.length;
	// At the beginning of a line a new name is being given, most likely.
	if (kind === 'calculation' && before.slice(0, from).trim() === '' && !asked) return undefined;
	const { kind: set, name, nameTo } = splitLine(line);
	if (set === 'function' && before.length <= line.indexOf('=') && before.length > nameTo)
		return undefined;
	const own = parametersOf(line).map((parameter): Suggestion => ({
		name: parameter,
		kind: 'quantity',
		detail: 'given to this function',
	}));
	const names = quantitiesOf(cells, evaluation).filter((one) => one.name !== name);
	const behindNumber = typed === '' ? endsInNumber(before) : last === 'unit';
	const behindUnit = /(?:\b(?:to|in)\s+|\d\s*[\p{L}°%]+\s*[/*]\s*)$/u.test(before.slice(0, from));
	if (behindNumber) return { from, list: [...unitsOf(words), ...(typed.length > 1 ? names : [])] };
	const units = behindUnit ? unitsOf(words) : [];
	return { from, list: [...own, ...units, ...names, ...builtIn(words)] };
}

const curveWords = { over: 'the range of', from: 'where it begins', to: 'where it ends' };

/** What stands around the range of a curve: names, and the word that comes next. */
function inCurve({ before, cells, evaluation, asked }: Around): Suggestions | undefined {
	if (before.includes('#')) return undefined;
	const typed = wordPattern.exec(before)?.[0] ?? '';
	const from = before.length - typed.length;
	const written = before.slice(0, from);
	const has = (word: string) => new RegExp(`(?:^|\\s)${word}\\s`, 'u').test(written);
	const next = (['over', 'from', 'to'] as const).find((word) => !has(word));
	// Behind its end a range may say how it is stepped; within it stand formulas.
	const words: Suggestion[] =
		next === undefined
			? [{ name: 'logarithmic', kind: 'constant', detail: 'steps of equal ratio' }]
			: [{ name: next, kind: 'constant', detail: curveWords[next] }];
	if (typed === '' && !asked) return undefined;
	const begun = words.filter(({ name }) => name.startsWith(typed) && /\S\s+$/.test(written));
	if (has('from')) return begun.length > 0 && typed !== '' ? { from, list: begun } : undefined;
	const quantities = quantitiesOf(cells, evaluation).filter(({ kind }) => kind === 'quantity');
	return { from, list: [...begun, ...quantities] };
}

function endsInNumber(before: string): boolean {
	const [last, other] = [tokenize(before).at(-1), tokenize(before).at(-2)];
	return last?.kind === 'number' || (last?.text.trim() === '' && other?.kind === 'number');
}

const unitLists = new WeakMap<Vocabulary, Suggestion[]>();

function unitsOf(words: Vocabulary): Suggestion[] {
	let list = unitLists.get(words);
	if (!list) {
		list = Object.entries(words.units).map(([name, { label, name: spoken }]) => ({
			name,
			kind: 'unit',
			...(label !== name && { label }),
			detail: spoken === name ? '' : spoken,
		}));
		unitLists.set(words, list);
	}
	return list;
}

function builtIn({ functions, constants, series }: Vocabulary): Suggestion[] {
	return [
		...Object.entries(functions).map(([name, { signature }]): Suggestion => ({
			name,
			kind: 'function',
			detail: signature.slice(name.length),
			ending: '(',
		})),
		...Object.entries(constants).map(([name, { value }]): Suggestion => ({
			name,
			kind: 'constant',
			detail: value,
		})),
		...Object.entries(series).map(([name, { members }]): Suggestion => ({
			name,
			kind: 'constant',
			detail: `${members} values in a decade`,
		})),
	];
}

const nameLists = new WeakMap<Evaluation, Suggestion[]>();

/** The note's own names with their values; those that have none at the moment as well. */
function quantitiesOf(cells: readonly NoteCell[], evaluation: Evaluation): Suggestion[] {
	const known = nameLists.get(evaluation);
	if (known) return known;
	const found = new Map<string, Suggestion>();
	for (const cell of cells) {
		if (cell.kind !== 'calculation') continue;
		for (const line of cell.source.split('\n')) {
			const { kind, name, nameTo, formulaFrom } = splitLine(line);
			if (name === undefined || found.has(name)) continue;
			if (kind === 'function') {
				const detail = line.slice(nameTo, formulaFrom).replace(/\s*=\s*$/, '');
				found.set(name, { name, kind: 'function', detail, ending: '(' });
			} else found.set(name, { name, kind: 'quantity', detail: valueOf(name, evaluation) });
		}
	}
	for (const name of Object.keys(evaluation.quantities))
		if (!found.has(name))
			found.set(name, { name, kind: 'quantity', detail: valueOf(name, evaluation) });
	const list = [...found.values()];
	nameLists.set(evaluation, list);
	return list;
}

function valueOf(name: string, { quantities }: Evaluation): string {
	if (!Object.hasOwn(quantities, name)) return '';
	const { number, doubt, unit } = quantities[name]!.readout;
	return [number, doubt && `± ${doubt}`, unit].filter(Boolean).join(' ');
}
