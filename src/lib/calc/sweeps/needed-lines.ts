import { isStatement } from '../correlated-lines';
import type { Note } from '../note';
import type { NoteLine } from '../note-lines';

/** The lines that some lines are computed from, themselves included. */
export function reached(from: readonly NoteLine[], note: Note): Set<NoteLine> {
	const seen = new Set(from);
	for (const line of seen)
		for (const { name } of line.references) {
			const used = note.definition(name);
			if (used) seen.add(used);
		}
	return seen;
}

/** All that some lines need to be computed without the rest of the note, in sheet order. */
export function neededLines(from: readonly NoteLine[], note: Note): NoteLine[] {
	const seen = reached(from, note);
	const isNeeded = (line: NoteLine) =>
		seen.has(line) ||
		(isStatement(line) &&
			line.references.every(({ name }) => {
				const used = note.definition(name);
				return used !== undefined && seen.has(used);
			}));
	return note.lines.filter(isNeeded);
}
