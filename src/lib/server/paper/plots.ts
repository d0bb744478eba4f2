import type { Evaluation, Sweep, Verdict } from '$lib/calc/results';
import { axisTitle } from '$lib/components/sweep-figures';
import { plotOf, wide, type Plot } from '$lib/components/sweep-scale';
import type { NoteCell } from '$lib/note/document';
import { visible } from './glyphs';

/** A sweep's picture: its lines as SVG of numbers alone, its words apart, and what is said under it. */
export interface PrintedPlot {
	width: number;
	height: number;
	svg: string;
	words: { x: number; y: number; t: string; side: 'left' | 'middle' | 'right'; tone: Tone }[];
	alt: string;
	/** Text of the comment behind its line. */
	caption: string;
	limits: {
		name: string;
		bounds: string;
		stretches: { verdict: Verdict | null; text: string }[];
		crossings: string;
	}[];
	/** Says what tint and dots mean; '' where nothing is in doubt. */
	key: string;
	remarks: string[];
}

type Tone = 'ink' | 'soft' | 'limit';

const strip = 7;
const dashes = ['', '7 4', '2 3.5', '10 3 2 3', '14 5', '4 2'];
const colours: Readonly<Record<Verdict, string>> = {
	met: '#23733f',
	undecided: '#8a5a00',
	'not met': '#b3311a',
};

/** The pictures of a curve cell, in the order of its lines. */
export function plotsOf(cell: NoteCell, { sweeps = [] }: Evaluation): PrintedPlot[] {
	return sweeps.filter((sweep) => sweep.cell === cell.id).map(printed);
}

function printed(sweep: Sweep): PrintedPlot {
	const more = strip * sweep.limits.length;
	const frame = { ...wide, height: wide.height + more, bottom: wide.bottom + more };
	const plot = plotOf(sweep, frame);
	const [right, floor] = [frame.width - frame.right, frame.height - frame.bottom];
	const names = sweep.series.map(({ name }) => name);
	const isDoubtful = sweep.series.some((one) => one.expandedUncertainties);
	return {
		width: frame.width,
		height: frame.height,
		svg: svgOf(plot, frame, right, floor),
		words: wordsOf(sweep, plot, frame, right),
		alt: visible(
			[
				`${names.join(', ')} over ${sweep.over.name}`,
				...sweep.limits.map(({ name, text }) => `${name}: ${text}`),
			].join('. '),
		),
		caption: visible(sweep.description ?? ''),
		limits: sweep.limits.map(({ name, lowerText, upperText, stretches, crossings }) => ({
			name: visible(name),
			bounds: visible(
				[
					lowerText === null ? '' : `at least ${lowerText}`,
					upperText === null ? '' : `at most ${upperText}`,
				]
					.filter(Boolean)
					.join(', '),
			),
			stretches: stretches.map(({ verdict, text }) => ({ verdict, text: visible(text) })),
			crossings:
				crossings.length === 0
					? ''
					: visible(
							`The value itself passes the limit at ${sweep.over.name} = ${crossings.map(({ text }) => text).join(', ')}.`,
						),
		})),
		key: isDoubtful
			? visible(
					`Tint: expanded uncertainty. Dotted: worst case. ${sweep.over.name} keeps the doubt that its line states.`,
				)
			: '',
		remarks: (sweep.remarks ?? []).map(visible),
	};
}

type Frame = typeof wide;

/** Nothing but numbers goes into it. */
function svgOf(plot: Plot, frame: Frame, right: number, floor: number): string {
	const { left, top, width, height } = frame;
	const path = (d: string, more: string) => (d === '' ? '' : `<path d="${d}" ${more}/>`);
	const line = 'fill="none" stroke=';
	const grid = `${line}"#1b2a16" stroke-opacity="0.13"`;
	return [
		`<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 ${width} ${height}">`,
		`<rect x="${left}" y="${top}" width="${right - left}" height="${floor - top}" fill="#e9efdf"/>`,
		...plot.limits.map(({ zone }) => path(zone, 'fill="#f9e1da"')),
		...plot.xTicks.map(({ at }) => path(`M${at} ${top}V${floor}`, grid)),
		...plot.yTicks.map(({ at }) => path(`M${left} ${at}H${right}`, grid)),
		...plot.series.flatMap(({ band, extremes, line: curve }, i) => [
			path(band, 'fill="#1b2a16" fill-opacity="0.2"'),
			path(extremes, `${line}"#566965" stroke-dasharray="1.5 2.5"`),
			path(
				curve,
				`${line}"#1b2a16" stroke-width="1.75" stroke-linejoin="round" ${dashes[i % 6] ? `stroke-dasharray="${dashes[i % 6]}"` : ''}`,
			),
		]),
		...plot.limits.map(({ line: edge }) => path(edge, `${line}"#b3311a" stroke-width="1.5"`)),
		path(`M${left} ${top}V${floor}H${right}`, `${line}"#9fb1ac"`),
		...plot.stretches.flatMap((stretches, row) =>
			stretches.flatMap(({ from, to, verdict }) =>
				verdict === null
					? []
					: [
							`<rect x="${from}" y="${floor + 3 + row * strip}" width="${Math.max(1, to - from)}" height="5" fill="${colours[verdict]}"/>`,
						],
			),
		),
		...(plot.present
			? [
					path(`M${plot.present.x} ${top}V${floor}`, `${line}"#4a5d59" stroke-dasharray="4 3"`),
					...plot.present.y.flatMap((y) =>
						y === null ? [] : [`<circle cx="${plot.present!.x}" cy="${y}" r="4" fill="#1b2a16"/>`],
					),
				]
			: []),
		'</svg>',
	].join('');
}

function wordsOf(sweep: Sweep, plot: Plot, frame: Frame, right: number): PrintedPlot['words'] {
	const names = sweep.series.map(({ name }) => name);
	const several = names.length > 1;
	const words: PrintedPlot['words'] = [
		{ x: 2, y: 12, t: axisTitle(names, sweep.shown), side: 'left', tone: 'ink' },
		{
			x: right,
			y: frame.height - 6,
			t: axisTitle([sweep.over.name], sweep.over.shown),
			side: 'right',
			tone: 'ink',
		},
	];
	for (const { at, text } of plot.xTicks)
		words.push({ x: at, y: frame.height - 24, t: text, side: 'middle', tone: 'soft' });
	for (const { at, text } of plot.yTicks)
		words.push({ x: frame.left - 7, y: at + 4, t: text, side: 'right', tone: 'soft' });
	for (const { side, text, name, at } of plot.limits) {
		const below = side === 'lower' || at.y < frame.top + 14;
		words.push({
			x: at.x + (at.isEnd ? -6 : 6),
			y: at.y + (below ? 14 : -5),
			t: `${side} limit ${text}${several ? ` of ${name}` : ''}`,
			side: at.isEnd ? 'right' : 'left',
			tone: 'limit',
		});
	}
	if (plot.present)
		words.push({
			x: plot.present.x,
			y: frame.top - 6,
			t: `present ${sweep.over.presentText}`,
			side: 'middle',
			tone: 'ink',
		});
	if (several) words.push(...namesOf(plot, frame, right));
	return words.map((word) => ({ ...word, t: visible(word.t) }));
}

/** Names at the ends of their lines, none over another. */
function namesOf(plot: Plot, frame: Frame, right: number): PrintedPlot['words'] {
	let last = Infinity;
	return plot.series
		.flatMap(({ name, endY }) => (endY === null ? [] : [{ name, endY }]))
		.sort((a, b) => b.endY - a.endY)
		.map(({ name, endY }) => {
			last = Math.min(endY - 18 < frame.top ? endY + 15 : endY - 7, last - 13);
			return { x: right - 6, y: last, t: name, side: 'right' as const, tone: 'ink' as const };
		});
}
