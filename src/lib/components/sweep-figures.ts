import type { AxisUnit, Sweep, SweepLimit, Verdict } from '$lib/calc/results';
import { rounded } from '$lib/calc/doubt/display';
import { formatNumber, group, minus } from '$lib/calc/units/number-text';

/** How an axis is called: "Vadc in mV". */
export function axisTitle(names: readonly string[], { unit }: AxisUnit): string {
	return names.join(', ') + (unit === '' ? '' : ` in ${unit}`);
}

/** A number of an axis with its uncertainty, in the unit that is shown: "2.4112 ± 0.0036 V". */
export function amountOf(
	value: number | null,
	doubt: number | null | undefined,
	axis: AxisUnit,
): string {
	if (value === null) return 'no value';
	const behind = axis.unit === '' ? '' : `\u00a0${axis.unit}`;
	return figureOf(value, doubt, axis) + behind;
}

/** The same without its unit. */
export function figureOf(
	value: number | null,
	doubt: number | null | undefined,
	{ factor }: AxisUnit,
): string {
	if (value === null) return '–';
	const figures = doubt ? rounded(value * factor, doubt * factor) : undefined;
	if (!figures) return formatNumber(Number((value * factor).toPrecision(12)));
	const sign = figures.value.startsWith('-') ? minus : '';
	return `${sign}${group(figures.value.replace('-', ''))} ±\u00a0${group(figures.uncertainty)}`;
}

/** The verdict of a requirement at a value of the range. */
export function verdictAt({ stretches }: SweepLimit, x: number): Verdict | null {
	return stretches.find(({ from, to }) => from <= x && x <= to)?.verdict ?? null;
}

/** What is read at a point: "Vmax = 32 V: Vadc = 2.4112 ± 0.0036 V, met". */
export function readingAt(sweep: Sweep, i: number): string {
	const { over, x, series, shown, limits } = sweep;
	const at = x[i] ?? 0;
	const parts = series.map(({ name, values, expandedUncertainties }) => {
		const verdicts = limits
			.filter((limit) => limit.name === name)
			.map((limit) => verdictAt(limit, at))
			.filter((verdict) => verdict !== null);
		const value = amountOf(values[i] ?? null, expandedUncertainties?.[i], shown);
		return [`${name} = ${value}`, ...new Set(verdicts)].join(', ');
	});
	return `${over.name} = ${amountOf(at, null, over.shown)}: ${parts.join('; ')}`;
}

/** All points with their numbers unrounded, as comma-separated values (RFC 4180). */
export function csvOf({ over, x, series, unit }: Sweep): string {
	const head = (name: string, of: string, what = '') =>
		`"${[name, what].filter(Boolean).join(' ')}${of === '1' ? '' : ` (${of})`}"`;
	const columns = series.flatMap(({ name, values, expandedUncertainties, worstCase }) => [
		{ head: head(name, unit), values },
		...(expandedUncertainties
			? [{ head: head(name, unit, 'expanded uncertainty'), values: expandedUncertainties }]
			: []),
		...(worstCase
			? [
					{ head: head(name, unit, 'lowest'), values: worstCase.lower },
					{ head: head(name, unit, 'highest'), values: worstCase.upper },
				]
			: []),
	]);
	const rows = x.map((value, i) =>
		[value, ...columns.map((column) => column.values[i] ?? '')].join(','),
	);
	return [[head(over.name, over.unit), ...columns.map((column) => column.head)].join(','), ...rows]
		.map((row) => `${row}\r\n`)
		.join('');
}
