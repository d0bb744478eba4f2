import { findSymbol, spokenName, symbolTexts } from '../units/table';
import { functions } from '../functions/registry';
import { constants } from '../functions/constants';
import { series } from '../functions/series';
import { canonical } from './characters';

/** Words that stand for operators and values. */
export const words: ReadonlySet<string> = new Set([
	'to',
	'in',
	'mod',
	'and',
	'or',
	'xor',
	'not',
	'end',
	'true',
	'false',
	'null',
	'undefined',
	'NaN',
	'Infinity',
]);

/** Why a name cannot be given to a quantity, as a message and another name; undefined where it is free. */
export function whyReserved(
	typed: string,
	taken: ReadonlySet<string>,
): { message: string; suggestion: string } | undefined {
	const name = canonical(typed);
	const unit = findSymbol(typed);
	const kind = unit
		? `the unit ${spokenName(unit)}`
		: constants.has(name)
			? 'a constant'
			: series.has(name)
				? 'a series of preferred values'
				: functions.has(name)
					? 'a function'
					: words.has(name)
						? 'a word of the formula language'
						: undefined;
	if (kind !== undefined)
		return { message: `\`${typed}\` is ${kind}.`, suggestion: free(typed, taken) };
	if (!name.startsWith('_') && !(name in Object.prototype) && name !== 'prototype')
		return undefined;
	return {
		message: `\`${typed}\` cannot be the name of a quantity.`,
		suggestion: free(typed.replace(/^_+/, ''), taken),
	};
}

function free(typed: string, taken: ReadonlySet<string>): string {
	const stem = typed.replace(/[^\p{L}\d_]/gu, '') || 'x';
	for (const ending of [...(typed === 'V' ? ['in'] : []), '1', '2', '3', '_1', '_2', '_3'])
		if (!taken.has(canonical(stem + ending)) && !isTaken(stem + ending)) return stem + ending;
	return `${stem}_4`;
}

function isTaken(typed: string): boolean {
	const name = canonical(typed);
	return (
		!!findSymbol(typed) ||
		constants.has(name) ||
		functions.has(name) ||
		series.has(name) ||
		words.has(name)
	);
}

/** The known name that looks most like an unknown one; undefined where none is near. */
export function nearest(typed: string, candidates: Iterable<string>): string | undefined {
	const wanted = canonical(typed);
	const most = wanted.length <= 2 ? 0.5 : wanted.length <= 5 ? 1 : 2;
	let best: { name: string; distance: number } | undefined;
	for (const name of candidates) {
		if (Math.abs(name.length - typed.length) > most + 1) continue;
		const distance = likeness(wanted, canonical(name), most);
		if (distance <= most && (!best || distance < best.distance)) best = { name, distance };
	}
	return best?.name;
}

/** Names of built-in functions and constants. */
export function* builtInNames(): Iterable<string> {
	yield* functions.keys();
	yield* constants.keys();
	yield* series.keys();
}

/** Units as suggestions behind a number. */
export function unitNames(): Iterable<string> {
	return symbolTexts();
}

/** Edits from one to the other; case and underscores count half, a swap of neighbours one. */
function likeness(a: string, b: string, most: number): number {
	const plain = (text: string) => text.toLowerCase().replaceAll('_', '');
	if (plain(a) === plain(b)) return 0.5;
	if (a.length <= 1 || b.length <= 1) return Infinity;
	const [x, y] = [a.toLowerCase(), b.toLowerCase()];
	let [older, previous]: [number[], number[]] = [
		[],
		Array.from({ length: y.length + 1 }, (_, j) => j),
	];
	for (let i = 1; i <= x.length; i++) {
		const row = [i];
		for (let j = 1; j <= y.length; j++) {
			const cost = x[i - 1] === y[j - 1] ? 0 : 1;
			let value = Math.min(
				(previous[j] ?? 0) + 1,
				(row[j - 1] ?? 0) + 1,
				(previous[j - 1] ?? 0) + cost,
			);
			if (i > 1 && j > 1 && x[i - 1] === y[j - 2] && x[i - 2] === y[j - 1])
				value = Math.min(value, (older[j - 2] ?? 0) + 1);
			row.push(value);
		}
		if (Math.min(...row) > most) return Infinity;
		[older, previous] = [previous, row];
	}
	return previous[y.length] ?? Infinity;
}
