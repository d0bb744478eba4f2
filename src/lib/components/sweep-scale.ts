import type { Sweep, SweepLimit, SweepSeries } from '$lib/calc/results';
import { linearTicks, logarithmicTicks, type Tick } from './ticks';

/** Size of a picture and of the free edges around its plot, in its own units. */
export interface Frame {
	width: number;
	height: number;
	left: number;
	right: number;
	top: number;
	bottom: number;
}

/** For a sheet, and for a column as narrow as a phone. */
export const wide: Frame = { width: 660, height: 312, left: 58, right: 14, top: 38, bottom: 40 };
export const narrow: Frame = { width: 320, height: 272, left: 50, right: 10, top: 38, bottom: 40 };

/** A limit as it is drawn: its line and what lies beyond it. */
interface DrawnLimit {
	line: string;
	zone: string;
	side: 'lower' | 'upper';
	name: string;
	text: string;
	/** Where its words stand: at the end of the line where the curve is farther away. */
	at: { x: number; y: number; isEnd: boolean };
}

interface DrawnSeries {
	name: string;
	line: string;
	/** Outline of its uncertainty; '' while it is exact. */
	band: string;
	/** Outlines of the worst case; '' while it is exact. */
	extremes: string;
	/** Height of its end, where its name stands. */
	endY: number | null;
}

/** All lines of a picture in its own units. */
export interface Plot {
	xTicks: (Tick & { at: number })[];
	yTicks: (Tick & { at: number })[];
	series: DrawnSeries[];
	/** Lines of a trial's curves. */
	tried: string[];
	limits: DrawnLimit[];
	/** Of the range's points. */
	xAt: number[];
	present: { x: number; y: (number | null)[] } | null;
	stretches: { from: number; to: number; verdict: SweepLimit['stretches'][number]['verdict'] }[][];
	toX(value: number): number;
	toY(value: number): number;
}

/**
 * Places everything of a sweep in a frame, and what a trial makes of it where that has the same units. Numbers of the
 * axes are those that are shown, times `factor`.
 */
export function plotOf(sweep: Sweep, frame: Frame, trial?: Sweep): Plot {
	const tried = trial && fitsInto(sweep, trial) ? trial : undefined;
	const { over, shown, logarithmic, x, series } = sweep;
	const [first = 0, last = 1] = [x[0], x.at(-1)];
	const [left, right] = [frame.left, frame.width - frame.right];
	const [top, bottom] = [frame.top, frame.height - frame.bottom];
	const share = (value: number) =>
		logarithmic
			? Math.log(value / first) / Math.log(last / first)
			: (value - first) / (last - first);
	const toX = (value: number) => left + share(value) * (right - left);
	const [lowest, highest] = heightsOf(sweep, tried?.series ?? []);
	const toY = (value: number) => bottom - ((value - lowest) / (highest - lowest)) * (bottom - top);
	const inside = (y: number) => Math.min(bottom, Math.max(top, y));
	const placed = (ticks: Tick[], factor: number, to: (value: number) => number) =>
		ticks.map((tick) => ({ ...tick, at: to(tick.value / factor) }));
	const ends = [first, last].map((end) => end * over.shown.factor) as [number, number];
	const across = frame.width / 80;
	const xAt = x.map(toX);
	const isWithin = over.present >= first && over.present <= last;
	return {
		xTicks: placed(
			logarithmic ? logarithmicTicks(...ends, across) : linearTicks(...ends, across),
			over.shown.factor,
			toX,
		),
		yTicks: placed(
			linearTicks(lowest * shown.factor, highest * shown.factor, 5),
			shown.factor,
			toY,
		),
		series: series.map((one) => drawnSeries(one, xAt, (value) => inside(toY(value)))),
		tried: (tried?.series ?? []).map(({ values }) =>
			lineThrough(
				tried!.x.map(toX),
				values.map((value, i) => (within(tried!.x[i]!, first, last) ? value : null)),
				(value) => inside(toY(value)),
			),
		),
		limits: sweep.limits.flatMap((limit) =>
			(['lower', 'upper'] as const).flatMap((side) => {
				const edge = limit[side];
				if (!edge || !edge.some((value) => value !== null && within(value, lowest, highest)))
					return [];
				const curve = series.find(({ name }) => name === limit.name)?.values ?? [];
				return drawnLimit(limit, side, curve, xAt, (value) => inside(toY(value)), {
					left,
					right,
					top,
					bottom,
				});
			}),
		),
		xAt,
		present: isWithin
			? {
					x: toX(over.present),
					y: series.map(({ present }) =>
						present !== null && within(present, lowest, highest) ? toY(present) : null,
					),
				}
			: null,
		stretches: sweep.limits.map(({ stretches }) =>
			stretches.map(({ from, to, verdict }) => ({ from: toX(from), to: toX(to), verdict })),
		),
		toX,
		toY,
	};
}

/** Whether the curve of a trial can be drawn beside the present one. */
export function fitsInto(sweep: Sweep, trial: Sweep): boolean {
	return trial.unit === sweep.unit && trial.over.unit === sweep.over.unit;
}

function within(value: number, lowest: number, highest: number): boolean {
	return value >= lowest && value <= highest;
}

/** How far a limit may lie from the curve and still be drawn, in heights of the curve. */
const reach = 1.5;

/** Lowest and highest value of the picture: all of the curves, limits that are near, zero where it is near. */
function heightsOf({ series, limits }: Sweep, tried: readonly SweepSeries[]): [number, number] {
	const numbers = [...series, ...tried].flatMap(({ values, worstCase, expandedUncertainties }) => [
		...values.flatMap((value, i) => {
			if (value === null) return [];
			const doubt = expandedUncertainties?.[i] ?? 0;
			return [value - doubt, value + doubt];
		}),
		...[...(worstCase?.lower ?? []), ...(worstCase?.upper ?? [])].filter((value) => value !== null),
	]);
	let [lowest, highest] = [Math.min(...numbers), Math.max(...numbers)];
	const size = highest - lowest || Math.abs(highest) * 0.1 || 1;
	const [low, high] = [lowest - reach * size, highest + reach * size];
	for (const { lower, upper } of limits)
		for (const limit of [...(lower ?? []), ...(upper ?? [])])
			if (limit !== null && limit >= low && limit <= high)
				[lowest, highest] = [Math.min(lowest, limit), Math.max(highest, limit)];
	if (lowest > 0 && lowest < 0.5 * highest) lowest = 0;
	if (highest < 0 && highest > 0.5 * lowest) highest = 0;
	const room = (highest - lowest || size) * 0.06;
	return [lowest === 0 ? 0 : lowest - room, highest === 0 ? 0 : highest + room];
}

function drawnSeries(
	{ name, values, expandedUncertainties, worstCase }: SweepSeries,
	x: readonly number[],
	toY: (value: number) => number,
): DrawnSeries {
	const parted = (heights: readonly (number | null)[]) => lineThrough(x, heights, toY);
	const around = (sign: 1 | -1) =>
		values.map((value, i) => {
			const doubt = expandedUncertainties?.[i];
			return value === null || doubt === null || doubt === undefined ? null : value + sign * doubt;
		});
	const last = values.findLast((value) => value !== null);
	return {
		name,
		line: parted(values),
		band: expandedUncertainties ? outline(x, around(-1), around(1), toY) : '',
		extremes: worstCase ? parted(worstCase.lower) + parted(worstCase.upper) : '',
		endY: last === undefined ? null : toY(last),
	};
}

/** A path through points, parted where one has no height. */
function lineThrough(
	x: readonly number[],
	heights: readonly (number | null)[],
	toY: (value: number) => number,
): string {
	let path = '';
	for (const [i, height] of heights.entries())
		if (height !== null) {
			const follows = i > 0 && heights[i - 1] !== null;
			path += `${follows ? 'L' : 'M'}${round(x[i]!)} ${round(toY(height))}`;
		}
	return path;
}

/** The area between two lines, in parts where one has no height. */
function outline(
	x: readonly number[],
	lower: readonly (number | null)[],
	upper: readonly (number | null)[],
	toY: (value: number) => number,
): string {
	let path = '';
	let run: number[] = [];
	const close = () => {
		if (run.length > 1) {
			const there = run.map((i) => `${round(x[i]!)} ${round(toY(upper[i]!))}`);
			const back = run.toReversed().map((i) => `${round(x[i]!)} ${round(toY(lower[i]!))}`);
			path += `M${[...there, ...back].join('L')}Z`;
		}
		run = [];
	};
	x.forEach((_, i) => {
		if (lower[i] === null || upper[i] === null) close();
		else run.push(i);
	});
	close();
	return path;
}

function drawnLimit(
	limit: SweepLimit,
	side: 'lower' | 'upper',
	curve: readonly (number | null)[],
	x: readonly number[],
	toY: (value: number) => number,
	{ left, right, top, bottom }: { left: number; right: number; top: number; bottom: number },
): DrawnLimit[] {
	const edge = limit[side];
	if (!edge) return [];
	const [only] = edge;
	const at =
		edge.length === 1 && only !== null && only !== undefined
			? [
					[left, toY(only)],
					[right, toY(only)],
				]
			: edge.flatMap((value, i) => (value === null ? [] : [[x[i]!, toY(value)]]));
	const points = at.map(([px, py]) => `${round(px!)} ${round(py!)}`);
	const outer = side === 'upper' ? top : bottom;
	const [start, end] = [at[0]!, at.at(-1)!];
	const [first, last] = [curve.find((value) => value !== null), curve.findLast((v) => v !== null)];
	const away = (value: number | null | undefined, y: number) =>
		value === null || value === undefined ? 0 : Math.abs(toY(value) - y);
	const isEnd = away(last, end[1]!) > away(first, start[1]!);
	return [
		{
			side,
			name: limit.name,
			line: `M${points.join('L')}`,
			zone: `M${points.join('L')}L${round(end[0]!)} ${outer}L${round(start[0]!)} ${outer}Z`,
			text: (side === 'upper' ? limit.upperText : limit.lowerText) ?? '',
			at: isEnd ? { x: end[0]!, y: end[1]!, isEnd } : { x: start[0]!, y: start[1]!, isEnd },
		},
	];
}

function round(length: number): number {
	return Math.round(length * 10) / 10;
}
