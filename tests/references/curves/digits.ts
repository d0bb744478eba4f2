import { readFileSync } from 'node:fs';

/** A published figure, as in the data files beside the tests. */
export interface Expected {
	quantity: string;
	/** Printed digits; null where nothing is printed. */
	published: string | null;
	recomputed: string | number;
	confirmed: string;
}

/** A case of a data file: what it is, where it is printed, its data and figures. */
export interface Case {
	id: string;
	title: string;
	source: { document: string; edition: string; locator: string };
	data?: { columns: string[]; rows?: string[][]; values?: string[] };
	expected: Expected[];
}

export function readCases(file: string): Case[] {
	const text = readFileSync(new URL(`../data/${file}`, import.meta.url), 'utf8');
	return (JSON.parse(text) as { cases: Case[] }).cases;
}

/** Digits that agree: −log10 of the relative error, of the absolute one where the published figure is zero. */
export function digits(computed: number | null, published: string): number {
	const certified = Number(published);
	if (computed === null) return Number.NaN;
	if (computed === certified) return 16;
	const error = Math.abs(computed - certified);
	return -Math.log10(certified === 0 ? error : error / Math.abs(certified));
}

export function columnOf(of: Case, name: string): number[] {
	const index = of.data?.columns.indexOf(name) ?? -1;
	if (of.data?.values && index === 0) return of.data.values.map(Number);
	return (of.data?.rows ?? []).map((row) => Number(row[index]));
}
