import { existsSync, mkdirSync, readFileSync, writeFileSync } from 'node:fs';

/** Lines of a table whose columns line up. */
export function lined(lines: readonly (readonly string[])[]): string {
	const widths = (lines[0] ?? []).map((_, column) =>
		Math.max(...lines.map((line) => line[column]?.length ?? 0)),
	);
	return lines
		.map((line) =>
			line
				.map((text, column) => text.padEnd(widths[column] ?? 0))
				.join('  ')
				.trimEnd(),
		)
		.join('\n');
}

/** Writes rows to a file under `test-results`; those of a run that was not made now stay as they are. */
export function keep(name: string, rows: readonly { id: string }[]): void {
	const file = `test-results/${name}`;
	mkdirSync('test-results', { recursive: true });
	const earlier = existsSync(file)
		? (JSON.parse(readFileSync(file, 'utf8')) as { id: string }[])
		: [];
	const kept = earlier.filter(({ id }) => !rows.some((row) => row.id === id));
	writeFileSync(file, `${JSON.stringify([...kept, ...rows], null, '\t')}\n`);
}
