/** One measured figure against what it should be and, where there is one, what another way of doing it takes. */
export interface Row {
	/** Area and name: `engine.…`, `sync.…`, `page.…`, `setup.…`. */
	id: string;
	what: string;
	value: number;
	unit: string;
	/** Largest value that is good enough. */
	target: number;
	/** The same job done by bare libraries, in the same unit. */
	peer: number | null;
	/** value / peer */
	ratio: number | null;
	ok: boolean;
}

/** A row, judged. */
export function row(
	figures: Pick<Row, 'id' | 'what' | 'value' | 'unit' | 'target'> & { peer?: number },
): Row {
	const { peer, ...rest } = figures;
	const value = rounded(rest.value);
	return {
		...rest,
		value,
		peer: peer === undefined ? null : rounded(peer),
		ratio: peer === undefined ? null : rounded(rest.value / peer),
		ok: value <= rest.target,
	};
}

/** The rows as lines of a table, with a head. */
export function table(rows: readonly Row[]): string {
	const head = ['id', 'what', 'value', 'target', 'peer', 'ratio', 'ok'];
	const cells = rows.map((one) => [
		one.id,
		one.what,
		`${one.value} ${one.unit}`,
		`${one.target} ${one.unit}`,
		one.peer === null ? '' : `${one.peer} ${one.unit}`,
		one.ratio === null ? '' : String(one.ratio),
		one.ok ? 'yes' : 'NO',
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

/** The value below which this share of the sample lies. */
export function quantile(sample: readonly number[], share: number): number {
	const sorted = [...sample].sort((a, b) => a - b);
	return sorted[Math.min(sorted.length - 1, Math.ceil(share * sorted.length) - 1)] ?? NaN;
}

function rounded(value: number): number {
	return Number(value.toPrecision(4));
}
