import { lined } from '../support/table';

/** One measured figure against what it should be and, where there is one, what another way of doing it takes. */
export interface Row {
	/** Area and name: `engine.…`, `sync.…`, `page.…`, `setup.…`. */
	id: string;
	what: string;
	value: number;
	unit: string;
	/** Largest value that is good enough; null where only the ratio counts. */
	target: number | null;
	/** The same job done by bare libraries, in the same unit. */
	peer: number | null;
	/** value / peer */
	ratio: number | null;
	/** Largest ratio that is good enough. */
	most: number | null;
	ok: boolean;
}

/** A row, judged. */
export function row(
	figures: Pick<Row, 'id' | 'what' | 'value' | 'unit'> & {
		target?: number;
		peer?: number;
		most?: number;
	},
): Row {
	const { peer, target = null, most = null, ...rest } = figures;
	const value = rounded(rest.value);
	const ratio = peer === undefined ? null : rounded(rest.value / peer);
	return {
		...rest,
		target,
		most,
		value,
		peer: peer === undefined ? null : rounded(peer),
		ratio,
		ok: value <= (target ?? Infinity) && (most === null || (ratio !== null && ratio <= most)),
	};
}

/** The rows as lines of a table, with a head. */
export function table(rows: readonly Row[]): string {
	const head = ['id', 'what', 'value', 'target', 'peer', 'ratio', 'most', 'ok'];
	const cells = rows.map((one) => [
		one.id,
		one.what,
		`${one.value} ${one.unit}`,
		one.target === null ? '' : `${one.target} ${one.unit}`,
		one.peer === null ? '' : `${one.peer} ${one.unit}`,
		one.ratio === null ? '' : String(one.ratio),
		one.most === null ? '' : String(one.most),
		one.ok ? 'yes' : 'NO',
	]);
	return lined([head, ...cells]);
}

/** The value below which this share of the sample lies. */
export function quantile(sample: readonly number[], share: number): number {
	const sorted = [...sample].sort((a, b) => a - b);
	return sorted[Math.min(sorted.length - 1, Math.ceil(share * sorted.length) - 1)] ?? NaN;
}

function rounded(value: number): number {
	return Number(value.toPrecision(4));
}
