import type { SkippedLine } from '$lib/calc/note-lines';
import type { Cell, Evaluation, Options } from '$lib/calc/results';
import type { Changes } from '$lib/protocol/changes';

/** What a child is asked. */
export interface Task {
	id: number;
	cells: readonly Cell[];
	options: Options;
	skip: SkippedLine[];
	/** The note, where its next evaluation is likely to come to the same child. */
	note?: string;
	/** An earlier task of the same note: where the child still has its results, it answers what changed since. */
	since?: number;
}

/** What a child answers: that it can be asked, how many trials are drawn, or the results of a task, whole or by what changed. */
export type Answer =
	| { kind: 'ready' }
	| { kind: 'progress'; id: number; drawn: number; total: number }
	| { kind: 'done'; id: number; results: Evaluation }
	| { kind: 'changed'; id: number; changes: Changes };

/** File descriptor on which a child says at which line it is, so that the one that stops it can be named. */
export const placeDescriptor = 4;

/** A place on that descriptor: index of the cell and line, eight bytes. */
export const placeBytes = 8;

export function writePlace(buffer: Buffer, cell: number, line: number): void {
	buffer.writeUInt32LE(cell, 0);
	buffer.writeUInt32LE(line, 4);
}

export function readPlace(buffer: Buffer): { cell: number; line: number } {
	return { cell: buffer.readUInt32LE(0), line: buffer.readUInt32LE(4) };
}
