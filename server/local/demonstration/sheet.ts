import type { NoteCell } from '$lib/note/document';

type Written = Omit<NoteCell, 'id'>;

/** A note of the demonstration as it is written down in its file. */
export interface Sheet {
	title: string;
	cells: Written[];
}

/** Prose, its lines as they are typed. */
export function prose(...lines: string[]): Written {
	return { kind: 'text', source: lines.join('\n') };
}

export function calculation(...lines: string[]): Written {
	return { kind: 'calculation', source: lines.join('\n') };
}

export function requirement(...lines: string[]): Written {
	return { kind: 'requirement', source: lines.join('\n') };
}

export function curve(line: string): Written {
	return { kind: 'curve', source: line };
}
