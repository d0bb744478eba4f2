import {
	Graph,
	layout,
	type EdgeLabel,
	type GraphLabel,
	type NodeLabel,
	type Point,
} from '@dagrejs/dagre';
import { typeset } from '$lib/calc/symbol';
import type { Knot, Network } from './network';

/** A knot at its place; `x` and `y` are its middle. */
interface Placed {
	knot: Knot;
	x: number;
	y: number;
	width: number;
	height: number;
}

/** The way from an input to what is computed from it. */
interface Link {
	from: string;
	to: string;
	path: string;
}

export interface Layout {
	knots: Placed[];
	links: Link[];
	width: number;
	height: number;
}

const height = 42;
const edge = 12;

/** Characters of a requirement that stand in its box. */
const mostShown = 26;

/** The name as it is shown in its box. */
export function shownName({ name, verdict }: Knot): string {
	if (verdict === undefined || name.length <= mostShown) return name;
	return `${name.slice(0, mostShown - 1)}…`;
}

/** Places knots in columns, inputs left of what is computed from them, with few crossings. */
export function layOut(network: Network, shown: ReadonlySet<string>): Layout {
	const graph = new Graph<GraphLabel, NodeLabel, EdgeLabel>({ directed: true });
	graph.setGraph({
		rankdir: 'LR',
		nodesep: 12,
		ranksep: 52,
		edgesep: 8,
		marginx: edge,
		marginy: edge,
	});
	graph.setDefaultEdgeLabel(() => ({}));
	for (const id of shown) {
		const knot = network.get(id);
		if (knot) graph.setNode(id, { width: widthOf(knot), height });
	}
	const pairs = [...shown].flatMap((id) =>
		(network.get(id)?.inputs ?? []).filter((from) => shown.has(from)).map((from) => [from, id]),
	);
	for (const [from, to] of pairs) graph.setEdge(from!, to!);
	layout(graph);
	const { width = 0, height: tall = 0 } = graph.graph();
	return {
		knots: [...shown].flatMap((id) => {
			const knot = network.get(id);
			const node = knot && graph.node(id);
			return knot && node ? [{ knot, x: node.x!, y: node.y!, width: node.width, height }] : [];
		}),
		links: pairs.map(([from, to]) => ({
			from: from!,
			to: to!,
			path: curved(between(graph.node(from!), graph.node(to!), graph.edge(from!, to!).points)),
		})),
		width: Number.isFinite(width) ? width : 2 * edge,
		height: Number.isFinite(tall) ? tall : 2 * edge,
	};
}

function widthOf(knot: Knot): number {
	const { glyph, sub } = typeset(knot.name);
	const name =
		knot.verdict === undefined
			? glyph.length * 8.6 + sub.length * 6.4
			: shownName(knot).length * 7.4;
	const figures = knot.readout.length * 7.3 + (knot.verdict ? knot.verdict.length * 6.6 + 24 : 0);
	return Math.max(72, Math.min(260, Math.max(name, figures) + 20));
}

/** The way out of the right side of a box and into the left side of another. */
function between(from: NodeLabel, to: NodeLabel, points: Point[] = []): Point[] {
	const [x = 0, y = 0] = [from.x, from.y];
	const [endX = 0, endY = 0] = [to.x, to.y];
	const start = { x: x + from.width / 2, y };
	const end = { x: endX - to.width / 2, y: endY };
	// What lies within the columns of the two boxes would make a loop at their sides.
	const way = points.slice(1, -1).filter((point) => point.x > start.x + 8 && point.x < end.x - 8);
	return [start, ...way, end];
}

/** A line through points that leaves and meets its boxes level. */
function curved(points: readonly Point[]): string {
	const [first, ...others] = points;
	if (!first) return '';
	let path = `M${round(first.x)} ${round(first.y)}`;
	let last = first;
	for (const point of others) {
		const middle = round((last.x + point.x) / 2);
		path += `C${middle} ${round(last.y)} ${middle} ${round(point.y)} ${round(point.x)} ${round(point.y)}`;
		last = point;
	}
	return path;
}

function round(length: number): number {
	return Math.round(length * 10) / 10;
}

/** The knot that an arrow key leads to: along the lines to the left and right, within a column up and down. */
export function neighbourOf(
	{ knots }: Layout,
	id: string,
	key: 'ArrowLeft' | 'ArrowRight' | 'ArrowUp' | 'ArrowDown',
): string | undefined {
	const here = knots.find(({ knot }) => knot.id === id);
	if (!here) return undefined;
	const { knot } = here;
	const nearest = (among: readonly Placed[]) =>
		among.toSorted((a, b) => Math.abs(a.y - here.y) - Math.abs(b.y - here.y))[0]?.knot.id;
	if (key === 'ArrowLeft') return nearest(knots.filter((one) => knot.inputs.includes(one.knot.id)));
	if (key === 'ArrowRight')
		return nearest(knots.filter((one) => knot.results.includes(one.knot.id)));
	const sign = key === 'ArrowUp' ? -1 : 1;
	const column = knots.filter(
		(one) =>
			Math.abs(one.x - here.x) <= (one.width + here.width) / 2 && (one.y - here.y) * sign > 1,
	);
	return nearest(column);
}
