import type { DividerQuestion, Limits } from '$lib/calc/tables/divider-question';
import { amountOf, shareOf } from './amounts';

/** The fields of the search as they are typed; empty ones ask for nothing. */
export interface Wishes {
	input: string;
	output: string;
	series: string;
	error: string;
	load: string;
	sourceFrom: string;
	sourceTo: string;
	currentFrom: string;
	currentTo: string;
	dissipation: string;
	doubled: boolean;
}

export const noWishes: Wishes = {
	input: '',
	output: '',
	series: 'E96',
	error: '1 %',
	load: '',
	sourceFrom: '',
	sourceTo: '',
	currentFrom: '',
	currentTo: '',
	dissipation: '',
	doubled: false,
};

const examples: Readonly<Partial<Record<keyof Wishes, string>>> = {
	input: '32 V',
	output: '2.4 V',
	error: '0.5 %',
	load: '1 Mohm',
	sourceFrom: '1 kohm',
	sourceTo: '50 kohm',
	currentFrom: '10 uA',
	currentTo: '100 uA',
	dissipation: '100 mW',
};

/** What is asked, or the fields that cannot be read with a sentence for each. */
export function questionOf(
	wishes: Wishes,
): { question: DividerQuestion } | { faults: Partial<Record<keyof Wishes, string>> } {
	const faults: Partial<Record<keyof Wishes, string>> = {};
	const read = (
		field: keyof Wishes,
		parse: (text: string) => number | undefined,
		needed = false,
	) => {
		const text = String(wishes[field]).trim();
		if (text === '' && !needed) return undefined;
		const value = parse(text);
		if (value === undefined || !(value > 0)) faults[field] = `Type it as in ${examples[field]}.`;
		return value;
	};
	const volts = (text: string) => amountOf(text, 'V');
	const ohms = (text: string) => amountOf(text, 'ohm');
	const amperes = (text: string) => amountOf(text, 'A');
	const inputVoltage = read('input', volts, true) ?? 0;
	const outputVoltage = read('output', volts, true) ?? 0;
	const error = read('error', shareOf, true);
	const load = read('load', ohms);
	const dissipation = read('dissipation', (text) => amountOf(text, 'W'));
	const sourceResistance = limits(read('sourceFrom', ohms), read('sourceTo', ohms));
	const current = limits(read('currentFrom', amperes), read('currentTo', amperes));
	if (Object.keys(faults).length > 0) return { faults };
	return {
		question: {
			inputVoltage,
			outputVoltage,
			series: wishes.series,
			doubled: wishes.doubled,
			...(error !== undefined && { error }),
			...(load !== undefined && { load }),
			...(dissipation !== undefined && { dissipation }),
			...(sourceResistance && { sourceResistance }),
			...(current && { current }),
		},
	};
}

function limits(atLeast: number | undefined, atMost: number | undefined): Limits | undefined {
	if (atLeast === undefined && atMost === undefined) return undefined;
	return {
		...(atLeast !== undefined && { atLeast }),
		...(atMost !== undefined && { atMost }),
	};
}
