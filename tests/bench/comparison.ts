import { performance } from 'node:perf_hooks';
import { defaultOptions, evaluate } from '$lib/calc/evaluate';
import { placedCells, type NoteCell } from '$lib/note/document';
import * as comparison from '$lib/server/comparison/comparison';
import { differences } from '$lib/server/comparison/differences';
import { env } from '$lib/server/env';
import { closePool, evaluateInChild } from '$lib/server/evaluation/pool';
import { current } from '$lib/server/evaluation/store';
import * as notes from '$lib/server/notes/notes';
import * as updates from '$lib/server/notes/updates';
import { createDatabase } from '../support/database';
import { freeze } from '../support/note-life';
import { makeCast } from '../support/people';
import { last200, lines200 } from './note-200';
import { quantile, row, type Row } from './row';

const times = 20;

/** Comparing two states of a note of 200 lines, of which an edit moved nearly every figure. */
export async function comparisonRows(): Promise<Row[]> {
	return [inDoubt(), ...(await fromDatabase())];
}

/** The differences alone, of notes in doubt that keep a budget of every quantity. */
function inDoubt(): Row {
	const lines = lines200(true);
	const state = (first: string) => {
		const source = [first, ...lines.slice(1)].join('\n');
		const cells: NoteCell[] = [{ id: 'c1', kind: 'calculation', source }];
		const results = evaluate(cells, { ...defaultOptions, detail: 'all' });
		return { content: { title: 'Two hundred lines', cells }, results };
	};
	const [from, to] = [state(lines[0] ?? ''), state('R_0 = tolerance(11 kohm, 2 %)')];
	const sample = Array.from({ length: times }, () => {
		const begun = performance.now();
		const found = differences(from, to);
		const took = performance.now() - begun;
		if (found.results.length < 100 || found.budgets.length < 50) {
			throw new Error(`${found.results.length} results, ${found.budgets.length} budgets moved`);
		}
		return took;
	});
	return row({
		id: 'comparison.differences',
		what: `differences of 200 lines in doubt with a budget each, 95 % of ${times} within`,
		value: quantile(sample, 0.95),
		unit: 'ms',
		target: 300,
	});
}

/** From the database to the answer. */
async function fromDatabase(): Promise<Row[]> {
	const database = await createDatabase();
	Object.assign(env(), { DATABASE_URL: database.url, CHECKPOINT_FOLDER: '' });
	try {
		const cast = await makeCast();
		// A child that has just begun reads the engine first.
		await evaluateInChild([{ id: 'c', kind: 'calculation', source: 'a = 1 V' }], defaultOptions);
		const { id, number } = await notes.create(cast.author, {
			title: 'Two hundred lines',
			cells: [
				{ kind: 'calculation', source: lines200(false).join('\n') },
				{ kind: 'requirement', source: `${last200} <= 100 V` },
				{ kind: 'text', source: 'It ends at {{V_169}}. '.repeat(100) },
			],
		});
		await current(id);
		const change = (text: string, by: string) =>
			updates.change(id, cast.author.personId, (doc) => {
				const source = placedCells(doc)[0]?.text;
				const at = source?.toJSON().indexOf(text) ?? -1;
				if (!source || at < 0) throw new Error(`the note does not hold ${text}`);
				source.delete(at, text.length);
				source.insert(at, by);
			});
		await freeze(cast, number);
		await change('R_0 = 10 kohm', 'R_0 = 11 kohm');
		await freeze(cast, number);
		await change('R_1 = 20 kohm', 'R_1 = 22 kohm');
		await current(id);
		const slowest = async (from: string, to: string) => {
			const sample: number[] = [];
			for (let round = 0; round < times; round++) {
				const begun = performance.now();
				const found = await comparison.compare(cast.engineer, number, { from, to });
				sample.push(performance.now() - begun);
				if (!found || found.inputs.length !== 1 || found.results.length < 100) {
					throw new Error(`${from} to ${to}: ${found?.results.length} results moved`);
				}
			}
			return quantile(sample, 0.95);
		};
		return [
			row({
				id: 'comparison.revisions',
				what: `two revisions of 200 lines, 95 % of ${times} within`,
				value: await slowest('A', 'B'),
				unit: 'ms',
				target: 300,
			}),
			row({
				id: 'comparison.working-copy',
				what: `a revision and the working copy of 200 lines, 95 % of ${times} within`,
				value: await slowest('B', 'working-copy'),
				unit: 'ms',
				target: 300,
			}),
		];
	} finally {
		await closePool();
		await database.drop();
	}
}
