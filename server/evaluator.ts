import { Calculator } from '$lib/calc/calculator';
import { helpWithTrials } from '$lib/calc/details';
import type { SharedDraw } from '$lib/calc/doubt/shared-trials';
import { defaultOptions, evaluate } from '$lib/calc/evaluate';
import { Memory } from '$lib/calc/memory';
import { Note } from '$lib/calc/note';
import { readLines } from '$lib/calc/note-lines';
import type { Cell, Evaluation } from '$lib/calc/results';
import { changesBetween } from '$lib/protocol/changes';
import {
	placeBytes,
	placeDescriptor,
	writePlace,
	type Answer,
	type Task,
} from '$lib/server/evaluation/exchange';
import { writeSync } from 'node:fs';
import { availableParallelism } from 'node:os';
import { isMainThread, parentPort, Worker } from 'node:worker_threads';

/** A note computed before: an edit computes only what depends on it, and tells only what changed. */
interface Known {
	calculator: Calculator;
	/** The last answers, by their tasks; they share what they have in common. */
	answers: Map<number, Evaluation>;
}

/** Those computed last. */
const known = new Map<string, Known>();
const mostKnown = 4;
/** Between the evaluations of an edited note, others of it are asked for, as of its details. */
const mostAnswers = 3;
/** Bytes of this process above which nothing is kept. */
const mostResident = 220e6;

/** A child that computes notes for another process until that goes away. It has no environment. */
function start(): void {
	if (!process.send) throw new Error('The evaluator runs as a child of another process only.');
	process.on('message', (task) => {
		answer(compute(task as Task));
	});
	process.on('disconnect', () => process.exit(0));
	// Signals to the group are the parent's to handle; it says goodbye by disconnecting.
	process.on('SIGINT', () => undefined);
	process.on('SIGTERM', () => undefined);
	warmUp();
	answer({ kind: 'ready' });
}

function answer(message: Answer): void {
	process.send?.(message);
}

function compute({ id, cells, options, skip, note, since }: Task): Answer {
	const index = new Map(cells.map((cell, i) => [cell.id, i]));
	const buffer = Buffer.alloc(placeBytes);
	const at = (cell: string, line: number) => {
		writePlace(buffer, index.get(cell) ?? 0, line);
		tell(buffer);
	};
	const trials = (drawn: number, total: number) => {
		answer({ kind: 'progress', id, drawn, total });
		return true;
	};
	const crew = (names: readonly string[], draw: SharedDraw) =>
		helper().postMessage({ cells, names, draw });
	const watch = { at, skip, trials, ...(availableParallelism() > 1 && { crew }) };
	const { calculator, answers } = knownOf(note);
	const results = calculator.evaluate(cells, options, watch);
	const before = since === undefined ? undefined : answers.get(since);
	answers.set(id, results);
	dropOldest(answers, mostAnswers);
	if (before) return { kind: 'changed', id, changes: changesBetween(before, results) };
	return { kind: 'done', id, results };
}

function knownOf(note: string | undefined): Known {
	if (process.memoryUsage.rss() > mostResident) known.clear();
	const fresh = { calculator: new Calculator(), answers: new Map<number, Evaluation>() };
	if (note === undefined) return fresh;
	const found = known.get(note) ?? fresh;
	known.delete(note);
	known.set(note, found);
	dropOldest(known, mostKnown);
	return found;
}

function dropOldest(kept: Map<unknown, unknown>, most: number): void {
	for (const oldest of kept.keys()) {
		if (kept.size <= most) return;
		kept.delete(oldest);
	}
}

function tell(buffer: Buffer): void {
	try {
		writeSync(placeDescriptor, buffer);
	} catch {
		// A full pipe only means that the parent is behind; the place is for the case that this process is ended.
	}
}

/** Runs the engine's paths once, so that the first note does not wait for the compiler. */
function warmUp(): void {
	const source =
		'R1 = tolerance(470 kohm, 1 %)\nR2 = preferred(R1 * 0.08, E96)\nk = R2 / (R1 + R2)\nV1 = 32 V * k\nx = 3 V + 2 A';
	evaluate(
		[
			{ id: 'a', kind: 'calculation', source },
			{ id: 'b', kind: 'requirement', source: '2 V < V1 <= 2.45 V' },
			{ id: 'c', kind: 'text', source: '{{V1: mV}}' },
		],
		defaultOptions,
	);
}

/** A second thread for drawing trials; it starts with the first ones and stays. */
let thread: Worker | undefined;

function helper(): Worker {
	if (thread) return thread;
	const started = new Worker(new URL(import.meta.url), {
		resourceLimits: { maxOldGenerationSizeMb: 128 },
	});
	started.unref();
	started.on('error', () => (thread = undefined));
	thread = started;
	return started;
}

/** What the second thread is asked: to compute the note itself and to draw trials of it beside the first one. */
interface Help {
	cells: readonly Cell[];
	names: readonly string[];
	draw: SharedDraw;
}

function help(): void {
	parentPort?.on('message', ({ cells, names, draw }: Help) => {
		helpWithTrials(new Note(readLines(cells, {}).lines, {}, new Memory()), names, draw);
	});
}

if (isMainThread) start();
else help();
