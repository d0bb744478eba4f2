import { defaultOptions, evaluate } from '$lib/calc/evaluate';
import {
	placeBytes,
	placeDescriptor,
	writePlace,
	type Answer,
	type Task,
} from '$lib/server/evaluation/exchange';
import { writeSync } from 'node:fs';

/** A child that computes notes for another process until that goes away. It has no environment and keeps no state. */
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

function compute({ id, cells, options, skip }: Task): Answer {
	const index = new Map(cells.map((cell, i) => [cell.id, i]));
	const buffer = Buffer.alloc(placeBytes);
	const at = (cell: string, line: number) => {
		writePlace(buffer, index.get(cell) ?? 0, line);
		tell(buffer);
	};
	return { kind: 'done', id, results: evaluate(cells, options, { at, skip }) };
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
		'R1 = 470 kohm\nR2 = preferred(R1 * 0.08, E96)\nk = R2 / (R1 + R2)\nV1 = 32 V * k\nx = 3 V + 2 A';
	evaluate(
		[
			{ id: 'a', kind: 'calculation', source },
			{ id: 'b', kind: 'requirement', source: '2 V < V1 <= 2.45 V' },
			{ id: 'c', kind: 'text', source: '{{V1: mV}}' },
		],
		defaultOptions,
	);
}

start();
