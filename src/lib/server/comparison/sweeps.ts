import type { Evaluation, Sweep, SweepSeries } from '$lib/calc/results';
import { formatNumber } from '$lib/calc/units/number-text';
import type { SweepChange } from '$lib/schemas/comparison';
import { isSame } from './amounts';

type Crossing = SweepChange['crossings'][number];

/** Pictures of quantities over another one that came, went, or whose points or crossings moved. */
export function sweepChanges(from: Evaluation, to: Evaluation): SweepChange[] {
	const [before, after] = [placed(from.sweeps), placed(to.sweeps)];
	return [...new Set([...after.keys(), ...before.keys()])].flatMap(
		(key) => changeOf(before.get(key), after.get(key)) ?? [],
	);
}

/** By cell and place among the pictures of that cell. */
function placed(sweeps: readonly Sweep[] = []): Map<string, Sweep> {
	const counts = new Map<string, number>();
	return new Map(
		sweeps.map((sweep) => {
			const count = counts.get(sweep.cell) ?? 0;
			counts.set(sweep.cell, count + 1);
			return [`${sweep.cell} ${count}`, sweep];
		}),
	);
}

function changeOf(from: Sweep | undefined, to: Sweep | undefined): SweepChange | undefined {
	const present = to ?? from;
	if (!present) return undefined;
	const { cell, line, over, series } = present;
	const told = {
		title: `${series.map(({ name }) => name).join(', ')} over ${over.name}`,
		place: { cell, line },
	};
	if (!from || !to) {
		return { ...told, change: to ? 'added' : 'removed', range: null, series: [], crossings: [] };
	}
	const isSameRange =
		from.over.unit === to.over.unit &&
		from.over.name === to.over.name &&
		from.x.length === to.x.length &&
		from.x.every((x, index) => isSame(x, to.x[index] ?? NaN));
	const range = isSameRange ? null : { from: rangeText(from), to: rangeText(to) };
	const moved = seriesChanges(from, to, isSameRange);
	const crossings = crossingChanges(from, to);
	if (!range && moved.length === 0 && crossings.length === 0) return undefined;
	return { ...told, change: 'moved', range, series: moved, crossings };
}

function rangeText({ over, x }: Sweep): string {
	const shown = (value: number | undefined) => formatNumber((value ?? 0) * over.shown.factor);
	const unit = over.shown.unit === '' ? '' : `\u00a0${over.shown.unit}`;
	return `${over.name} from ${shown(x[0])} to ${shown(x.at(-1))}${unit}, ${x.length} points`;
}

function seriesChanges(from: Sweep, to: Sweep, isSameRange: boolean): SweepChange['series'] {
	const names = new Set([...to.series, ...from.series].map(({ name }) => name));
	return [...names].flatMap((name): SweepChange['series'] => {
		const [old, now] = [from, to].map(({ series }) => series.find((one) => one.name === name));
		const points = (now ?? old)?.values.length ?? 0;
		if (!old || !now) return [{ name, change: now ? 'added' : 'removed', moved: 0, points }];
		const moved = isSameRange ? movedPoints(old, now, from.unit === to.unit) : 0;
		return moved === 0 ? [] : [{ name, change: 'moved', moved, points }];
	});
}

/** Points whose value or half-width is another one. */
function movedPoints(from: SweepSeries, to: SweepSeries, isSameUnit: boolean): number {
	if (!isSameUnit) return to.values.length;
	const differs = (a: number | null | undefined, b: number | null | undefined) =>
		typeof a === 'number' && typeof b === 'number' ? !isSame(a, b) : (a ?? null) !== (b ?? null);
	return to.values.filter(
		(value, index) =>
			differs(from.values[index], value) ||
			differs(from.expandedUncertainties?.[index], to.expandedUncertainties?.[index]),
	).length;
}

function crossingChanges(from: Sweep, to: Sweep): Crossing[] {
	const [before, after] = [crossingsOf(from), crossingsOf(to)];
	return [...new Set([...after.keys(), ...before.keys()])].flatMap((key): Crossing[] => {
		const [old, now] = [before.get(key), after.get(key)];
		if (old && now && from.over.unit === to.over.unit && isSame(old.x, now.x)) return [];
		const [name = '', limit] = key.split(' ');
		return [
			{
				name,
				limit: limit === 'lower' ? 'lower' : 'upper',
				from: old?.text ?? null,
				to: now?.text ?? null,
			},
		];
	});
}

/** Crossings in the order in which a curve passes its limits, so that the first is held against the first. */
function crossingsOf({ limits }: Sweep): Map<string, { x: number; text: string }> {
	const found = new Map<string, { x: number; text: string }>();
	for (const { name, cell, line, crossings } of limits) {
		const counts = { lower: 0, upper: 0 };
		for (const { x, limit, text } of crossings) {
			found.set(`${name} ${limit} ${cell} ${line} ${counts[limit]}`, { x, text });
			counts[limit] += 1;
		}
	}
	return found;
}
