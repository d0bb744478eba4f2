import { existsSync, mkdirSync, readFileSync, writeFileSync } from 'node:fs';

/** What came of one fault. */
export interface Row {
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
	const widths = head.map((title, column) =>
		Math.max(title.length, ...cells.map((line) => line[column]?.length ?? 0)),
	);
	return [head, ...cells]
		.map((line) =>
			line
				.map((text, column) => text.padEnd(widths[column] ?? 0))
				.join('  ')
				.trimEnd(),
		)
		.join('\n');
}

/** Writes rows to `test-results/faults.json`; those of faults that were not run now stay as they are. */
export function keep(rows: readonly Row[]): void {
	const file = 'test-results/faults.json';
	mkdirSync('test-results', { recursive: true });
	const earlier = existsSync(file) ? (JSON.parse(readFileSync(file, 'utf8')) as Row[]) : [];
	const kept = earlier.filter(({ id }) => !rows.some((row) => row.id === id));
	writeFileSync(file, `${JSON.stringify([...kept, ...rows], null, '\t')}\n`);
}
