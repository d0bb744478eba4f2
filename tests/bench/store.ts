import { memoryUsage } from 'node:process';
import { setFlagsFromString } from 'node:v8';
import { runInNewContext } from 'node:vm';
import * as Y from 'yjs';
import { defaultOptions } from '$lib/calc/engine';
import { placedCells, seedContent, titleOf } from '$lib/note/document';
import { closePool, evaluateInChild } from '$lib/server/evaluation/pool';
import { append, type Edit } from '$lib/server/notes/append';
import { loadDocument } from '$lib/server/notes/updates';
import { Proof } from '../../server/sync/proof';
import { Random } from '../faults/random';
import { medianMs } from './clock';
import { quantile, row, type Row } from './row';

/** New notes to write into, and who writes. */
export interface Desk {
	author: string;
	makeNote: () => Promise<string>;
}

/** What the store and the limits take by themselves, without sockets. */
export async function storeRows(desk: Desk): Promise<Row[]> {
	return [
		...documents(),
		await longLog(desk),
		...(await commits(desk)),
		...mutants(),
		...(await evaluators()),
	];
}

const median = (sample: readonly number[]) => quantile(sample, 0.5);

/** Opening documents that are stored as one state. */
function documents(): Row[] {
	const large = new Y.Doc();
	const source = 'U_out = U_in * R_2 / (R_1 + R_2)\n'.repeat(8);
	seedContent(large, {
		title: 'Three hundred cells',
		cells: Array.from({ length: 300 }, () => ({ kind: 'calculation' as const, source })),
	});
	const state = Y.encodeStateAsUpdate(large);
	const sessions = Y.encodeStateAsUpdate(ofManySessions(10_000));
	const open = (bytes: Uint8Array) => () => {
		const doc = new Y.Doc();
		Y.applyUpdate(doc, bytes);
		if (placedCells(doc).length === 0) throw new Error('the document is empty');
	};
	return [
		row({
			id: 'store.open-300-cells',
			what: `making a document of 300 cells from its state of ${Math.round(state.length / 1000)} kB`,
			value: medianMs(open(state)),
			unit: 'ms',
			target: 20,
		}),
		row({
			id: 'store.heap-300-cells',
			what: 'heap that the same takes',
			value: heapOf(state),
			unit: 'MB',
			target: 1,
		}),
		row({
			id: 'store.open-10000-sessions',
			what: `making a document that 10 000 sessions wrote in, ${Math.round(sessions.length / 1000)} kB`,
			value: medianMs(open(sessions), 20),
			unit: 'ms',
			target: 200,
		}),
	];
}

/** A note in which each of many sessions, with a client id of its own, has typed a few letters. */
function ofManySessions(count: number): Y.Doc {
	const doc = new Y.Doc();
	seedContent(doc, { title: 'Sessions', cells: [{ kind: 'text', source: '' }] });
	for (let session = 0; session < count; session++) {
		doc.clientID = session + 1;
		const text = placedCells(doc)[0]?.text;
		text?.insert(text.length, 'some ');
	}
	return doc;
}

/** Heap in MB for one document, from that of many. */
function heapOf(state: Uint8Array): number {
	setFlagsFromString('--expose-gc');
	const collect = runInNewContext('gc') as () => void;
	const held: Y.Doc[] = [];
	const count = 20;
	collect();
	const before = memoryUsage().heapUsed;
	for (let made = 0; made < count; made++) {
		const doc = new Y.Doc();
		Y.applyUpdate(doc, state);
		held.push(doc);
	}
	collect();
	return (memoryUsage().heapUsed - before) / held.length / 1e6;
}

/** Edits that type, one letter each, by a client of its own. */
async function typed(noteId: string, personId: string, count: number): Promise<Edit[]> {
	const { doc } = await loadDocument(noteId);
	const title = titleOf(doc);
	const edits: Edit[] = [];
	doc.on('update', (bytes: Uint8Array) => {
		const id = `${doc.clientID}-${edits.length}`;
		edits.push({ id, personId, bytes, clients: [doc.clientID], cells: [] });
	});
	for (let key = 0; key < count; key++) title.insert(title.length, 'x');
	return edits;
}

async function longLog({ author, makeNote }: Desk): Promise<Row> {
	const updates = 20_000;
	const noteId = await makeNote();
	const edits = await typed(noteId, author, updates);
	for (let at = 0; at < updates; at += 2000) await append(noteId, edits.slice(at, at + 2000));
	const sample: number[] = [];
	for (let round = 0; round < 7; round++) {
		const from = performance.now();
		await loadDocument(noteId);
		sample.push(performance.now() - from);
	}
	return row({
		id: 'store.open-20000-updates',
		what: `reading and applying a log of ${updates} updates without a snapshot, median`,
		value: median(sample),
		unit: 'ms',
		target: 150,
	});
}

/** Transactions that store one edit each and are flushed, by so many at once. */
async function commits({ author, makeNote }: Desk): Promise<Row[]> {
	const each = 400;
	const run = async (lanes: Edit[][], notes: string[]) => {
		const from = performance.now();
		await Promise.all(
			lanes.map(async (edits, lane) => {
				for (const edit of edits) await append(notes[lane] ?? '', [edit]);
			}),
		);
		return (performance.now() - from) / lanes.flat().length;
	};
	const eight = await Promise.all(Array.from({ length: 8 }, makeNote));
	const lanes = await Promise.all(eight.map((note) => typed(note, author, each)));
	const hot = await makeNote();
	const same = await typed(hot, author, 8 * each);
	const cut = Array.from({ length: 8 }, (_, lane) => same.slice(lane * each, (lane + 1) * each));
	const one = await run(lanes.slice(0, 1), eight);
	const many = await run(lanes.slice(1), eight.slice(1));
	const busy = await run(
		cut,
		cut.map(() => hot),
	);
	return [
		row({
			id: 'store.commit-1',
			what: 'a durable commit of one edit, one after the other',
			value: one,
			unit: 'ms',
			target: 0.5,
		}),
		row({
			id: 'store.commit-8',
			what: 'the same, several notes at once: time for each commit',
			value: many,
			unit: 'ms',
			target: 0.25,
		}),
		row({
			id: 'store.commit-hot',
			what: 'the same, eight at once into one note',
			value: busy,
			unit: 'ms',
			target: 1.25,
		}),
	];
}

/** Spoilt updates: what the slowest of them holds up. */
function mutants(): Row[] {
	const random = new Random(11);
	const doc = new Y.Doc();
	const cells = [{ kind: 'calculation' as const, source: 'U = 5 V\nR = 2 kohm\n'.repeat(40) }];
	seedContent(doc, { title: 'Divider', cells });
	const proof = new Proof(doc);
	const sample: number[] = [];
	for (let count = 0; count < 20_000; count++) {
		const page = new Y.Doc();
		Y.applyUpdate(page, Y.encodeStateAsUpdate(doc));
		titleOf(page).insert(0, 'new');
		const bytes = Y.encodeStateAsUpdate(page, Y.encodeStateVector(doc));
		const spoilt = Uint8Array.from(random.chance(0.1) ? random.bytes(200) : bytes);
		for (let change = random.below(4); change >= 0; change--) {
			if (spoilt.length > 0) spoilt[random.below(spoilt.length)] = random.below(256);
		}
		const end = random.chance(0.2) ? random.below(spoilt.length) : spoilt.length;
		const from = performance.now();
		proof.judge(spoilt.subarray(0, end), 'ann', () => undefined);
		sample.push(performance.now() - from);
	}
	return [
		row({
			id: 'store.mutant-worst',
			what: `judging a spoilt update, the slowest of ${sample.length}`,
			value: Math.max(...sample),
			unit: 'ms',
			target: 1000,
		}),
		row({
			id: 'store.mutant-p99',
			what: 'the same, p99',
			value: quantile(sample, 0.99),
			unit: 'ms',
			target: 50,
		}),
	];
}

/** Lines that are within every bound that is checked before and keep a processor busy. */
const busy = Array.from({ length: 60 }, (_, i) => `busy${i} = max(((1:24000) * 0 + 170)!)`);

async function evaluators(): Promise<Row[]> {
	const compute = async (source: string) => {
		const from = performance.now();
		const results = await evaluateInChild(
			[{ id: 'c', kind: 'calculation', source }],
			defaultOptions,
		);
		return { results, ms: performance.now() - from };
	};
	try {
		await compute('x = 1');
		const warm: number[] = [];
		for (let round = 0; round < 50; round++) warm.push((await compute(`x = ${round}`)).ms);
		const endless = await compute(busy.join('\n'));
		if (!endless.results.errors.some(({ code }) => code === 'tooLong'))
			throw new Error('nothing had to be stopped');
		return [
			row({
				id: 'store.evaluator-warm',
				what: 'a first line from a warm evaluator, median',
				value: median(warm),
				unit: 'ms',
				target: 20,
			}),
			row({
				id: 'store.evaluator-endless',
				what: 'a note whose lines would take far too long, to its answer',
				value: endless.ms,
				unit: 'ms',
				target: 2500,
			}),
		];
	} finally {
		await closePool();
	}
}
