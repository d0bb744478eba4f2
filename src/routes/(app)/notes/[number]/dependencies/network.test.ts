import { expect, test } from 'vitest';
import { defaultOptions, evaluate } from '$lib/calc/evaluate';
import type { NoteCell } from '$lib/note/document';
import { layOut, neighbourOf } from './placing';
import { along, islandOf, networkOf, pathsOf } from './network';

function networkFrom(lines: readonly string[], requirements: readonly string[] = []) {
	const cells: NoteCell[] = [
		{ id: 'a', kind: 'calculation', source: lines.join('\n') },
		{ id: 'q', kind: 'requirement', source: requirements.join('\n') },
	];
	return networkOf(cells, evaluate(cells, defaultOptions));
}

const divider = networkFrom(
	[
		'Vmax = 32 V',
		'R1 = tolerance(470 kohm, 1 %)',
		'R2 = 38.3 kohm',
		'Rsum = R1 + R2',
		'ratio(a1) = a1 / Rsum',
		'Vadc = Vmax * ratio(R2)',
		'Vref = 2.5 V',
		'spare = 1 - Vadc / Vref',
		'alone = 3',
	],
	['Vadc <= 0.98 * Vref  # room', 'spare >= 1 %'],
);

test('a network holds quantities and requirements with what they say, through functions as well', () => {
	expect(divider.get('Vadc')).toMatchObject({
		inputs: ['Vmax', 'R2', 'Rsum'],
		results: ['spare', 'q:1'],
	});
	expect(divider.get('R1')!.readout).toBe('470.0 ± 5.3 kΩ');
	expect(divider.get('q:1')).toMatchObject({
		name: 'Vadc <= 0.98 * Vref',
		verdict: 'met',
		inputs: ['Vadc', 'Vref'],
		results: [],
	});
});

test('paths go up to the inputs and down to the results, nearest first', () => {
	const ids = (knots: readonly { id: string }[]) => knots.map(({ id }) => id);
	expect(ids(along(divider, 'Vadc', 'inputs'))).toEqual(['Vmax', 'R2', 'Rsum', 'R1']);
	expect(ids(along(divider, 'Vadc', 'results'))).toEqual(['spare', 'q:1', 'q:2']);
	expect(pathsOf(divider, 'Rsum')).toEqual(
		new Set(['Rsum', 'R1', 'R2', 'Vadc', 'spare', 'q:1', 'q:2']),
	);
	expect(islandOf(divider, 'R1').has('Vref')).toBe(true);
	expect(islandOf(divider, 'R1').has('alone')).toBe(false);
});

test('inputs stand left of what is computed from them, and arrow keys follow the lines', () => {
	const shown = islandOf(divider, 'Vadc');
	const layout = layOut(divider, shown);
	const placed = new Map(layout.knots.map((one) => [one.knot.id, one]));
	expect(placed.size).toBe(shown.size);
	for (const { from, to } of layout.links)
		expect(placed.get(from)!.x + placed.get(from)!.width / 2).toBeLessThan(
			placed.get(to)!.x - placed.get(to)!.width / 2,
		);
	expect(neighbourOf(layout, 'Rsum', 'ArrowRight')).toBe('Vadc');
	expect(['R1', 'R2']).toContain(neighbourOf(layout, 'Rsum', 'ArrowLeft'));
	expect(neighbourOf(layout, 'Vmax', 'ArrowLeft')).toBeUndefined();
	const column = layout.knots
		.filter(({ x }) => x === placed.get('R1')!.x)
		.sort((a, b) => a.y - b.y);
	const down = neighbourOf(layout, column[0]!.knot.id, 'ArrowDown');
	expect(down && neighbourOf(layout, down, 'ArrowUp')).toBe(column[0]!.knot.id);
});

test('sixty quantities are laid out without boxes over one another', () => {
	const lines = Array.from({ length: 60 }, (_, i) =>
		i < 12 ? `q${i} = tolerance(${i + 1} V, 1 %)` : `q${i} = q${i - 5} + q${i - 11} / 3`,
	);
	const network = networkFrom(lines, ['q59 <= 900 V']);
	const { knots } = layOut(network, islandOf(network, 'q59'));
	expect(knots.length).toBeGreaterThan(50);
	for (const [i, a] of knots.entries())
		for (const b of knots.slice(i + 1)) {
			const apart =
				Math.abs(a.x - b.x) >= (a.width + b.width) / 2 ||
				Math.abs(a.y - b.y) >= (a.height + b.height) / 2;
			expect(apart, `${a.knot.id} and ${b.knot.id}`).toBe(true);
		}
});

test('definitions in a circle are no trap', () => {
	const network = networkFrom(['x1 = 1', 'f1(n) = n > 0 ? f1(n - 1) + x1 : 0', 'y1 = f1(3)']);
	expect(network.get('y1')!.inputs).toEqual(['x1']);
});
