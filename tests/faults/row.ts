import { lined } from '../support/table';

/** What came of one fault. */
interface Row {
	id: string;
	fault: string;
	/** Times it was brought about. */
	injected: number;
	/** Edits that the server acknowledged. */
	acknowledged: number;
	lost: number;
	doubled: number;
	phantom: number;
	diverged: number;
	ok: boolean;
}

/** What is told besides the row: seconds until everybody could write again, and seconds in all. */
export interface Told {
	row: Row;
	recoverySeconds: number;
	seconds: number;
}

/** The rows as lines of a table, with a head. */
export function table(told: readonly Told[]): string {
	const head = [
		...['id', 'fault', 'injected', 'acknowledged', 'lost', 'doubled', 'phantom', 'diverged'],
		...['recovery', 'took', 'ok'],
	];
	const cells = told.map(({ row, recoverySeconds, seconds }) => [
		row.id,
		row.fault,
		...[row.injected, row.acknowledged, row.lost, row.doubled, row.phantom, row.diverged].map(
			String,
		),
		`${recoverySeconds.toFixed(1)} s`,
		`${seconds.toFixed(0)} s`,
		row.ok ? 'yes' : 'NO',
	]);
	return lined([head, ...cells]);
}
