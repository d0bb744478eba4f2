import type { Evaluation, Verdict } from '$lib/calc/results';
import { splitLine } from '$lib/components/lines';
import { definitionOf, wordsOf } from '$lib/editor/uses';
import type { NoteCell } from '$lib/note/document';

/** A quantity or a requirement of a note. */
export interface Knot {
	id: string;
	/** Name of the quantity, or the requirement as it is written. */
	name: string;
	readout: string;
	verdict?: Verdict;
	cell: string;
	line: number;
	/** Ids of what it is computed from, and of what is computed from it, direct ones. */
	inputs: string[];
	results: string[];
}

/** What depends on what in a note. */
export type Network = ReadonlyMap<string, Knot>;

/** Quantities and requirements with their figures as they are now. What a function of the note uses counts for its callers. */
export function networkOf(cells: readonly NoteCell[], evaluation: Evaluation): Network {
	const { quantities, requirements } = evaluation;
	const network = new Map<string, Knot>();
	const behind = new Map<string, string[]>();
	for (const [name, { readout, cell, line, dependsOn }] of Object.entries(quantities))
		network.set(name, {
			...{ id: name, name, cell, line },
			readout: [readout.number, readout.doubt && `± ${readout.doubt}`, readout.unit]
				.filter(Boolean)
				.join(' '),
			inputs: dependsOn,
			results: [],
		});
	for (const { cell, line, verdict, dependsOn, valueText } of requirements) {
		const text = cells.find(({ id }) => id === cell)?.source.split('\n')[line - 1] ?? '';
		const id = `${cell}:${line}`;
		const name = text.slice(0, splitLine(text).formulaTo).trim();
		const knot = { id, name, readout: valueText, verdict, cell, line };
		network.set(id, { ...knot, inputs: dependsOn, results: [] });
	}
	for (const knot of network.values()) {
		const inputs = knot.inputs.flatMap((name) => quantitiesBehind(name, cells, evaluation, behind));
		knot.inputs = [...new Set(inputs)].filter((name) => name !== knot.id);
		for (const input of knot.inputs) network.get(input)?.results.push(knot.id);
	}
	return network;
}

/** A quantity itself, or those that a function uses. */
function quantitiesBehind(
	name: string,
	cells: readonly NoteCell[],
	evaluation: Evaluation,
	known: Map<string, string[]>,
): string[] {
	if (Object.hasOwn(evaluation.quantities, name)) return [name];
	const before = known.get(name);
	if (before) return before;
	// A function may use itself.
	known.set(name, []);
	const text = definitionOf(cells, name)?.text ?? '';
	const words = wordsOf(text).filter(({ kind, text: word }) => kind !== 'unit' && word !== name);
	const found = words.flatMap(({ text: word }) => quantitiesBehind(word, cells, evaluation, known));
	known.set(name, found);
	return found;
}

/** All that lies upstream (`inputs`) or downstream (`results`) of something, nearest first, without itself. */
export function along(network: Network, id: string, way: 'inputs' | 'results'): Knot[] {
	const seen = new Set([id]);
	for (const each of seen) for (const next of network.get(each)?.[way] ?? []) seen.add(next);
	seen.delete(id);
	return [...seen].flatMap((each) => network.get(each) ?? []);
}

/** The chosen one with all that it hangs together with directly or through others. */
export function pathsOf(network: Network, id: string): Set<string> {
	const both = [...along(network, id, 'inputs'), ...along(network, id, 'results')];
	return new Set([id, ...both.map((knot) => knot.id)]);
}

/** Everything that is connected with something at all, in the network's order. */
export function islandOf(network: Network, id: string): Set<string> {
	const seen = new Set([id]);
	for (const each of seen) {
		const knot = network.get(each);
		for (const next of [...(knot?.inputs ?? []), ...(knot?.results ?? [])]) seen.add(next);
	}
	return new Set([...network.keys()].filter((each) => seen.has(each)));
}
