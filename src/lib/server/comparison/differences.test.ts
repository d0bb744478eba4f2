import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { evaluate } from '$lib/calc/evaluate';
import { defaultOptions } from '$lib/calc/engine';
import type { NoteCell, NoteContent } from '$lib/note/document';
import type { Delta, Differences } from '$lib/schemas/comparison';
import { spaced } from '../../../../tests/support/notes';
import { differences } from './differences';
import type { Material } from './written';

const kinds = { c: 'calculation', r: 'requirement', t: 'text' } as const;

/** A note of cells whose id begins with the letter of their kind. */
function note(cells: Record<string, string>, title = 'Divider'): Material {
	const listed = Object.entries(cells).map(([id, source]): NoteCell => ({
		id,
		kind: kinds[id[0] as keyof typeof kinds],
		source,
	}));
	const content: NoteContent = { title, cells: listed };
	return { content, results: evaluate(listed, { ...defaultOptions, detail: 'all' }) };
}

const nothing: Differences = {
	title: null,
	inputs: [],
	results: [],
	formulas: [],
	renamed: [],
	budgets: [],
	requirements: [],
	cells: [],
	texts: [],
	displays: [],
	sweeps: [],
};
const plain = (text: string | null) => text && spaced(text);
const told = (delta: Delta | undefined) =>
	delta &&
	[delta.from, delta.to, delta.difference?.text ?? null, delta.relative?.text ?? null].map((text) =>
		plain(text),
	);

describe('causes and effects', () => {
	const a = note({
		c1: 'V_in = 10 V # supply\nR_1 = tolerance(30 kohm, 1 %)\nR_2 = 10 kohm\nV_out = V_in * R_2 / (R_1 + R_2)',
		r1: 'V_out <= 2.55 V',
	});
	const b = note({
		c1: 'V_in = 12 V # supply\nR_1 = tolerance(30 kohm, 0.5 %)\nR_2 = 10 kohm\nV_out = V_in * R_2 / (R_1 + R_2)',
		r1: 'V_out <= 2.55 V',
	});
	const found = differences(a, b);

	test('an input that changed is told with old, new, difference and percent', () => {
		expect(found.inputs.map(({ name }) => name)).toEqual(['V_in', 'R_1']);
		expect(told(found.inputs[0]?.value)).toEqual(['10 V', '12 V', '+2 V', '+20 %']);
		expect(found.inputs[0]?.doubt).toBeUndefined();
		expect(found.inputs[1]?.value).toBeUndefined();
		// Half of 1.96 × 300 Ω/√3 (JCGM 100:2008, 4.3.7 and G.1.3).
		expect(told(found.inputs[1]?.doubt)?.slice(2)).toEqual(['−169.7 Ω', '−50 %']);
	});

	test('a result that moved is told with its value and its uncertainty', () => {
		const [result] = found.results;
		expect(result).toMatchObject({
			name: 'V_out',
			change: 'moved',
			place: { cell: 'c1', line: 4 },
		});
		// V_in R_2/(R_1 + R_2): 2.5 V becomes 3 V.
		expect(result?.value?.difference?.value).toBeCloseTo(0.5, 12);
		expect(result?.value?.relative?.value).toBeCloseTo(0.2, 12);
		expect(result?.doubt?.relative?.value).toBeCloseTo(0.6 - 1, 6);
	});

	test('a verdict that turned is told, with its margin on both sides', () => {
		expect(found.requirements).toMatchObject([
			{
				turned: true,
				from: { requirement: 'V_out <= 2.55 V', verdict: 'met' },
				to: { requirement: 'V_out <= 2.55 V', verdict: 'not met' },
			},
		]);
	});

	test('nothing is a cause that only moved because something else did', () => {
		expect(found.formulas).toEqual([]);
		expect(found.renamed).toEqual([]);
		expect(found.cells).toEqual([]);
	});
});

test('the same quantity in another unit is no change, and its line is told as written differently', () => {
	const found = differences(
		note({ c1: 'V_off = 5 mV\nx = 2*V_off' }),
		note({ c1: 'V_off = 0.005 V\nx = 2 * V_off' }),
	);
	expect(found).toMatchObject({ inputs: [], results: [] });
	expect(found.formulas).toMatchObject([{ name: 'V_off', change: 'changed', moved: false }]);
	expect(found.texts).toHaveLength(1);
});

test.each([
	['T_a = 20 degC', 'T_a = 25 degC', ['20 °C', '25 °C', '+5 K', null]],
	['T_a = 20 degC', 'T_a = 293.15 K', undefined],
	['T_a = 20 degC', 'T_a = 298.15 K', ['20 °C', '298.15 K', '+5 K', null]],
	['x = 2 %', 'x = 0.02', undefined],
	['x = 0', 'x = 1', ['0', '1', '+1', null]],
	['x = 1 V', 'x = 1 A', ['1 V', '1 A', null, null]],
	['x = [1, 2] V', 'x = [1, 2] V', undefined],
	['x = [1, 2] V', 'x = [1, 3] V', ['[1, 2] V', '[1, 3] V', null, null]],
])('from %s to %s', (before, after, expected) => {
	const [change] = differences(note({ c1: before }), note({ c1: after })).inputs;
	expect(told(change?.value)).toEqual(expected);
});

test('a quantity that only got another name is renamed, with all that uses it', () => {
	const found = differences(
		note({ c1: 'V_in = 10 V\nR = 2 ohm\nI = V_in / R\nP = I^2 * R' }),
		note({ c1: 'V_supply = 10 V\nR = 2 ohm\nI_load = V_supply / R\nP = I_load^2 * R' }),
	);
	expect(found.renamed).toEqual([
		{ from: 'V_in', to: 'V_supply' },
		{ from: 'I', to: 'I_load' },
	]);
	expect(found).toMatchObject({ inputs: [], results: [], formulas: [] });
});

test('a name that came where another one went is no rename while its formula is another one', () => {
	const found = differences(note({ c1: 'a = 1 V\nb = 2 a' }), note({ c1: 'c = 3 V\nb = 2 c' }));
	expect(found.renamed).toEqual([]);
	expect(found.inputs.map(({ name, change }) => `${name} ${change}`)).toEqual([
		'c added',
		'a removed',
	]);
});

test('two lines that could both be the new name of one are no rename', () => {
	const found = differences(note({ c1: 'a = 1 V' }), note({ c1: 'b = 1 V\nc = 1 V' }));
	expect(found.renamed).toEqual([]);
	expect(found.inputs).toHaveLength(3);
});

test('a formula that changed is told with its words, and whether its figure moved', () => {
	const found = differences(
		note({ c1: 'a = 2 V\nb = 2 a\nf(x) = x' }),
		note({ c1: 'a = 2 V\nb = 3 a\nf(x) = 2 x' }),
	);
	expect(found.formulas).toMatchObject([
		{
			name: 'b',
			moved: true,
			parts: [{ text: 'b = ' }, { text: '2' }, { text: '3' }, { text: ' a' }],
		},
		{ name: 'f', moved: false },
	]);
	expect(found.results.map(({ name }) => name)).toEqual(['b']);
});

test('a share of a budget that moved is told with the contributions', () => {
	const cells = (tolerance: string) => ({
		c1: `a = tolerance(1 V, 1 %)\nb = tolerance(1 V, ${tolerance})\nc = a + b`,
	});
	const [change] = differences(note(cells('1 %')), note(cells('2 %'))).budgets.filter(
		({ quantity }) => quantity === 'c',
	);
	// Variances add: 1 to 1 becomes 1 to 4.
	expect(
		change?.contributions.map(({ input, fromShare, toShare }) => [input, fromShare, toShare]),
	).toEqual([
		['b', expect.closeTo(0.5, 9), expect.closeTo(0.8, 9)],
		['a', expect.closeTo(0.5, 9), expect.closeTo(0.2, 9)],
	]);
});

test('a line that has no figure any more is told as such', () => {
	const found = differences(
		note({ c1: 'a = 2 V\nb = 2 a' }),
		note({ c1: 'a = 2 V\nb = 2 a + 1 A' }),
	);
	expect(found.results).toMatchObject([
		{ name: 'b', change: 'moved', from: { number: '4' }, to: null },
	]);
});

test('cells that came, went, moved and changed kind are told by their numbers', () => {
	const before = note({ t1: '## Purpose', c1: 'a = 1', t2: 'Text', t3: 'V <= 3 V' });
	const after = note({ t2: 'Text', t1: '## Purpose', c2: 'b = 2', t3: 'V <= 3 V' });
	after.content.cells = after.content.cells.map((cell) =>
		cell.id === 't3' ? { ...cell, kind: 'requirement' } : cell,
	);
	expect(
		differences(before, after).cells.map(({ cell, change, fromTerminal, toTerminal }) => [
			cell,
			change,
			fromTerminal,
			toTerminal,
		]),
	).toEqual([
		[expect.stringMatching(/^t[12]$/), 'moved', expect.any(Number), expect.any(Number)],
		['c2', 'added', null, 3],
		['t3', 'kind', 4, 4],
		['c1', 'removed', 2, null],
	]);
});

test('a requirement that moved to another cell is the same one', () => {
	const before = note({ c1: 'V = 2 V', r1: 'V <= 3 V\nV >= 1 V' });
	const after = note({ c1: 'V = 2 V', r1: 'V >= 1 V', r2: 'V <= 3 V' });
	expect(differences(before, after).requirements).toEqual([]);
});

test('how readouts are set is told where it changed', () => {
	const [before, after] = [note({ c1: 'a = 1 V' }), note({ c1: 'a = 1 V' })];
	before.content.shown = { a: { unit: 'mV' }, b: { digits: 3 } };
	after.content.shown = { a: { unit: 'mV', digits: 1 }, b: { digits: 3 }, c: { unit: 'kV' } };
	expect(differences(before, after).displays).toEqual([
		{ name: 'a', from: 'mV', to: 'mV, 1 digit' },
		{ name: 'c', from: null, to: 'kV' },
	]);
});

describe('any two notes', () => {
	const value = fc.constantFrom(
		'1 V',
		'0.001 kV',
		'2 V',
		'tolerance(2 V, 1 %)',
		'normal(2 V, 10 mV)',
		'a',
		'2 a',
		'b + 1 V',
	);
	const cell = fc
		.array(fc.tuple(fc.constantFrom('a', 'b', 'c', 'd_1'), value), { maxLength: 4 })
		.map((lines) => lines.map(([name, formula]) => `${name} = ${formula}`).join('\n'));
	const requirement = fc
		.array(fc.constantFrom('a <= 2 V', 'b <= 2 V', 'a >= 1 V # why'), { maxLength: 3 })
		.map((lines) => lines.join('\n'));
	const any = fc
		.record(
			{ c1: cell, r1: requirement, c2: cell, t1: fc.lorem({ maxCount: 5 }) },
			{ requiredKeys: [] },
		)
		.map((cells) => note(cells));

	test('a note compared with itself has no differences', () => {
		fc.assert(
			fc.property(any, (a) => {
				expect(differences(a, a)).toEqual(nothing);
			}),
			{ numRuns: 60 },
		);
	});

	test('the other way round, what came went and each difference has the other sign', () => {
		fc.assert(
			fc.property(any, any, (a, b) => {
				expect(gist(differences(b, a), true)).toEqual(gist(differences(a, b), false));
			}),
			{ numRuns: 150 },
		);
	});
});

/** What differences say whichever way they are told. */
function gist(found: Differences, back: boolean) {
	const turn = <T>(from: T, to: T) => (back ? [to, from] : [from, to]);
	const came = { added: 'removed', removed: 'added' } as Record<string, string>;
	const change = (kind: string) => (back ? (came[kind] ?? kind) : kind);
	const delta = (one: Delta | undefined) =>
		one && [turn(one.from, one.to), (back ? -1 : 1) * (one.difference?.value ?? 0) + 0];
	const figures = (list: Differences['inputs']) =>
		list
			.map(({ name, formerName = name, ...one }) =>
				JSON.stringify([
					turn(formerName, name),
					change(one.change),
					delta(one.value),
					delta(one.doubt),
				]),
			)
			.sort();
	return {
		inputs: figures(found.inputs),
		results: figures(found.results),
		formulas: found.formulas
			.map(({ name, formerName = name, ...one }) =>
				[turn(formerName, name).join(), change(one.change), one.moved].join(),
			)
			.sort(),
		renamed: found.renamed.map(({ from, to }) => turn(from, to).join()).sort(),
		budgets: found.budgets
			.flatMap(({ contributions }) =>
				contributions.map(({ fromShare, toShare }) => JSON.stringify(turn(fromShare, toShare))),
			)
			.sort(),
		requirements: found.requirements
			.map(({ from, to, turned }) => JSON.stringify([turn(from, to), turned]))
			.sort(),
		cells: found.cells
			.map((one) => [one.cell, change(one.change), turn(one.fromTerminal, one.toTerminal)].join())
			.sort(),
		texts: found.texts.map(({ cell, hunks }) => [cell, hunks.length].join()).sort(),
	};
}
