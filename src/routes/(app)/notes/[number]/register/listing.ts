import type { Evaluation, Quantity, Verdict } from '$lib/calc/results';
import type { NoteCell } from '$lib/note/document';
import { formulasOf } from '$lib/note/trial';
import { registerOf } from '../register';

/** What the register may be narrowed to. */
export const kinds = {
	all: 'All',
	inputs: 'Inputs',
	results: 'Results',
	'in doubt': 'In doubt',
	'not met': 'Not met',
	undecided: 'Undecided',
	'no value': 'Without a value',
} as const;
export type Kind = keyof typeof kinds;

export const orders = { sheet: 'Sheet order', name: 'By name', state: 'By state' } as const;
export type Order = keyof typeof orders;

/** A quantity of the register. */
export interface Entry {
	name: string;
	cellId: string;
	/** 1-based. */
	line: number;
	/** Absent where its line has no value. */
	quantity: Quantity | undefined;
	/** The worst verdict of the requirements that speak of it. */
	verdict: Verdict | undefined;
	isInput: boolean;
}

interface Wish {
	typed: string;
	kind: Kind;
	order: Order;
}

const severity: readonly (Verdict | undefined)[] = ['not met', 'undecided', 'met', undefined];

/** All quantities of a note, also those that have no value, in the order of the sheet. */
export function entriesOf(cells: readonly NoteCell[], evaluation: Evaluation): Entry[] {
	const verdicts = worstVerdicts(evaluation);
	const entries = registerOf(cells, evaluation).map(([name, quantity]): Entry => ({
		name,
		cellId: quantity.cell,
		line: quantity.line,
		quantity,
		verdict: verdicts.get(name),
		isInput: quantity.dependsOn.length === 0,
	}));
	const known = new Set(entries.map(({ name }) => name));
	const functions = new Set(
		evaluation.lines.filter(({ kind }) => kind === 'function').map(({ name }) => name),
	);
	const faulty = new Set(evaluation.errors.map(({ cell, line }) => `${cell} ${line}`));
	const without = [...formulasOf(cells)]
		.filter(([name, { cellId, line }]) => {
			return !known.has(name) && !functions.has(name) && faulty.has(`${cellId} ${line}`);
		})
		.map(([name, { cellId, line }]): Entry => ({
			name,
			cellId,
			line,
			quantity: undefined,
			verdict: verdicts.get(name),
			isInput: false,
		}));
	if (without.length === 0) return entries;
	const places = new Map(cells.map(({ id }, index) => [id, index]));
	const place = ({ cellId }: Entry) => places.get(cellId) ?? cells.length;
	return [...entries, ...without].sort((a, b) => place(a) - place(b) || a.line - b.line);
}

/** The entries that fit, in the order that is wanted. Words are looked for in names and comments; a unit counts whole. */
export function narrowed(entries: readonly Entry[], { typed, kind, order }: Wish): Entry[] {
	const words = typed.toLowerCase().split(/\s+/).filter(Boolean);
	const found = entries.filter(
		(entry) => fits(entry, kind) && words.every((word) => holds(entry, word)),
	);
	if (order === 'name') {
		return found.sort((a, b) => a.name.localeCompare(b.name, 'en', { numeric: true }));
	}
	return order === 'state' ? found.sort((a, b) => rank(a) - rank(b)) : found;
}

function fits({ quantity, verdict, isInput }: Entry, kind: Kind): boolean {
	switch (kind) {
		case 'all':
			return true;
		case 'inputs':
			return isInput;
		case 'results':
			return !isInput && quantity !== undefined;
		case 'in doubt':
			return quantity?.readout.doubt !== undefined;
		case 'no value':
			return quantity === undefined;
		default:
			return verdict === kind;
	}
}

function holds({ name, quantity }: Entry, word: string): boolean {
	const { description = '', readout, unit } = quantity ?? {};
	const units = [readout?.unit, unit].map((each) => each?.toLowerCase());
	return (
		`${name} ${description}`.toLowerCase().includes(word) ||
		units.some((each) => each === word.replace(/^[μµ]/, 'µ'))
	);
}

/** What wants attention comes first: no value, then by verdict, then what is in doubt. */
function rank({ quantity, verdict }: Entry): number {
	if (!quantity) return 0;
	return 1 + 2 * severity.indexOf(verdict) + (quantity.readout.doubt === undefined ? 1 : 0);
}

function worstVerdicts({ requirements }: Evaluation): Map<string, Verdict> {
	const worst = new Map<string, Verdict>();
	for (const { dependsOn, verdict } of requirements) {
		for (const name of dependsOn) {
			const known = worst.get(name);
			if (known === undefined || severity.indexOf(verdict) < severity.indexOf(known))
				worst.set(name, verdict);
		}
	}
	return worst;
}
