import type { NoteCell } from '$lib/note/document';
import type { WorkSession } from '$lib/schemas/history';

/** ", 25 min of work" behind a session's end; nothing for less than a minute. */
export function lasted({ from, to }: WorkSession): string {
	const minutes = Math.round((Date.parse(to) - Date.parse(from)) / 60_000);
	if (minutes < 1) return '';
	return minutes < 120 ? `, ${minutes} min of work` : `, ${Math.round(minutes / 60)} h of work`;
}

/** Which cells a session changed, by the numbers they have on the sheet that is shown. */
export function cellWords(session: WorkSession, cells: readonly NoteCell[]): string {
	const numbers = cells.flatMap(({ id }, index) => (session.cells.includes(id) ? [index + 1] : []));
	const others = session.cells.length - numbers.length;
	if (session.cells.length === 0) return 'title or order';
	const named =
		numbers.length === 0
			? ''
			: numbers.length > 6
				? `${numbers.length} cells`
				: `${numbers.length === 1 ? 'cell' : 'cells'} ${numbers.join(', ')}`;
	const rest = others === 0 ? '' : `${others} not on this sheet`;
	return [named, rest].filter((part) => part !== '').join(', ');
}
