import { engineVersion } from '$lib/calc/engine';
import type { Evaluation, Options } from '$lib/calc/results';
import type { NoteContent } from '$lib/note/document';
import { demand, type Actor } from '../auth/access';
import { optionsOf } from '../evaluation/note-options';
import { evaluateInChild } from '../evaluation/pool';
import { seal } from './digest';
import * as revisions from './revisions';

interface Difference {
	/** Name of a quantity, or the place of a requirement. */
	name: string;
	frozen: string;
	now: string;
}

/** Whether the present engine gives the figures that were frozen, and which it does not. */
export interface Reproduction {
	reproduces: boolean;
	frozenEngine: string;
	presentEngine: string;
	/** Results that were compared. */
	figures: number;
	differences: Difference[];
}

/** Computes a frozen revision again with the present engine, with the options it was frozen with. */
export async function ofRevision(
	actor: Actor,
	number: string,
	letter: string,
): Promise<Reproduction> {
	demand(actor, 'readFrozen');
	const { revision, content, results } = await revisions.get(actor, number, letter);
	return compare(content, results, revision.details?.options ?? optionsOf(content));
}

/** The same from what a candidate keeps. */
export async function compare(
	content: NoteContent,
	frozen: Evaluation,
	options: Options,
): Promise<Reproduction> {
	const now = await evaluateInChild(content.cells, options);
	const [before, after] = [figuresOf(frozen), figuresOf(now)];
	const names = [...new Set([...before.keys(), ...after.keys()])];
	const differences = names
		.filter((name) => before.get(name)?.canonical !== after.get(name)?.canonical)
		.map((name) => ({
			name,
			frozen: before.get(name)?.text ?? 'nothing',
			now: after.get(name)?.text ?? 'nothing',
		}));
	return {
		reproduces: differences.length === 0,
		frozenEngine: frozen.engine,
		presentEngine: engineVersion,
		figures: names.length,
		differences,
	};
}

function figuresOf({ quantities, requirements, curves = {}, sweeps = [] }: Evaluation) {
	const written = (value: unknown, text: string) => ({ canonical: seal(value).canonical, text });
	return new Map([
		...Object.entries(quantities).map(
			([name, quantity]) => [name, written(quantity, quantity.text)] as const,
		),
		...Object.entries(curves).map(
			([name, curve]) => [`curve ${name}`, written(curve, `degree ${curve.degree}`)] as const,
		),
		...sweeps.map((sweep) => {
			const names = sweep.series.map(({ name }) => name).join(', ');
			const text = sweep.series.map(({ presentText }) => presentText).join(', ');
			return [`${names} over ${sweep.over.name}, ${sweep.cell}`, written(sweep, text)] as const;
		}),
		...requirements.map(
			(one) => [`requirement ${one.cell}, line ${one.line}`, written(one, one.text)] as const,
		),
	]);
}
