import { constants } from '../functions/constants';
import { functions } from '../functions/registry';
import { series } from '../functions/series';
import { spokenName, unitSymbols } from '../units/table';
import { words } from './names';

/** The words of the formula language as an editor offers and explains them. */
export interface Vocabulary {
	functions: Readonly<
		Record<string, { signature: string; help: string; example: string; result: string }>
	>;
	/** By the symbol as it is typed; `label` is how it is printed, `name` how it is spoken. */
	units: Readonly<Record<string, { label: string; name: string }>>;
	/** Value and unit. */
	constants: Readonly<Record<string, { value: string }>>;
	/** Series of preferred values, by the values of a decade. */
	series: Readonly<Record<string, { members: number }>>;
	words: Readonly<Record<string, true>>;
}

/** Everything that may be written in a formula beside the note's own names. */
export function vocabulary(): Vocabulary {
	const of = <T>(entries: Iterable<readonly [string, T]>) => Object.fromEntries(entries);
	return {
		functions: of(
			[...functions.values()].map(({ name, signature, help, examples }) => [
				name,
				{ signature, help, example: examples[0]?.source ?? '', result: examples[0]?.result ?? '' },
			]),
		),
		units: of(
			[...unitSymbols()].map((unit) => [unit.text, { label: unit.label, name: spokenName(unit) }]),
		),
		constants: of(
			[...constants].map(([name, { value, unit }]) => [
				name,
				{ value: unit ? `${value} ${unit.label}` : String(value) },
			]),
		),
		series: of([...series].map(([name, values]) => [name, { members: values.length }])),
		words: of([...words].map((word) => [word, true as const])),
	};
}
