import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { applyChanges, changesBetween } from '$lib/protocol/changes';
import { Calculator } from './calculator';
import { defaultOptions, evaluate } from './evaluate';
import type { Cell, Evaluation } from './results';

const names = ['V1', 'V2', 'R1', 'R2', 'R3', 'k1', 'I1', 'f1', 'f2', 'P1'];

const name = fc.constantFrom(...names);
const number = fc.constantFrom('1', '2.5', '1e3', '470', '0.1');
const unit = fc.constantFrom('V', 'kohm', 'mA', '', '', '%');
const literal = fc.tuple(number, unit).map(([x, u]) => `${x} ${u}`.trim());
const { formula } = fc.letrec<{ formula: string }>((tie) => ({
	formula: fc.oneof(
		{ maxDepth: 3 },
		literal,
		name,
		fc
			.tuple(tie('formula'), fc.constantFrom('+', '-', '*', '/'), tie('formula'))
			.map(([a, op, b]) => `(${a} ${op} ${b})`),
		tie('formula').map((x) => `tolerance(${x}, 1 %)`),
		tie('formula').map((x) => `normal(${x}, 0.5 %)`),
		tie('formula').map((x) => `abs(${x})`),
		fc.tuple(fc.constantFrom('f1', 'f2'), tie('formula')).map(([f, x]) => `${f}(${x})`),
		fc.tuple(name, tie('formula'), tie('formula')).map(([c, a, b]) => `(${c} > 1 V ? ${a} : ${b})`),
		name.map((x) => `uncertainty(${x})`),
		tie('formula').map((x) => `line1(${x})`),
		fc.constant('mean(volts)'),
	),
}));
const line = fc.oneof(
	{ weight: 8, arbitrary: fc.tuple(name, formula).map(([n, f]) => `${n} = ${f}`) },
	{
		weight: 2,
		arbitrary: fc
			.tuple(fc.constantFrom('f1', 'f2'), formula)
			.map(([f, body]) => `${f}(x) = x * 2 + ${body}`),
	},
	{ weight: 2, arbitrary: formula },
	{
		weight: 1,
		arbitrary: fc
			.tuple(name, name, number)
			.map(([a, b, r]) => `correlated(${a}, ${b}, ${r} / 500)`),
	},
	{ weight: 1, arbitrary: fc.constantFrom('', '# words', 'V1 = ', '3 V + 2 A') },
);
const lines = fc.array(line, { maxLength: 14 });
const limits = fc.array(
	fc
		.tuple(formula, fc.constantFrom('<=', '>', '=='), formula)
		.map(([a, op, b]) => `${a} ${op} ${b}`),
	{ maxLength: 4 },
);

type Edit =
	| { kind: 'replace' | 'insert'; at: number; line: string }
	| { kind: 'delete'; at: number }
	| { kind: 'swap'; at: number };
const at = fc.nat(13);
const edit: fc.Arbitrary<Edit> = fc.oneof(
	fc.record({ kind: fc.constantFrom('replace' as const, 'insert' as const), at, line }),
	fc.record({ kind: fc.constant('delete' as const), at }),
	fc.record({ kind: fc.constant('swap' as const), at }),
);

function edited(source: string[], change: Edit): string[] {
	const i = Math.min(change.at, source.length);
	const [before, after] = [source.slice(0, i), source.slice(i + 1)];
	switch (change.kind) {
		case 'replace':
			return [...before, change.line, ...after];
		case 'insert':
			return [...before, change.line, ...source.slice(i)];
		case 'delete':
			return [...before, ...after];
		case 'swap':
			return [...after, ...before];
	}
}

function cellsOf(source: string[], requirements: string[]): Cell[] {
	const half = Math.floor(source.length / 2);
	return [
		{ id: 'a', kind: 'calculation', source: source.slice(0, half).join('\n') },
		{ id: 'q', kind: 'requirement', source: requirements.join('\n') },
		{ id: 't', kind: 'text', source: 'The range is {{V1}} at {{R1: ohm}}.' },
		{ id: 'b', kind: 'calculation', source: source.slice(half).join('\n') },
		{
			id: 'r',
			kind: 'readings',
			columns: [
				{ name: 'codes', unit: '1', values: [1, 2, 3, source.length] },
				{ name: 'volts', unit: 'V', values: [0.1, 0.22, 0.3, 0.4 + requirements.length] },
			],
		},
		{ id: 'c', kind: 'curve', name: 'line1', x: 'codes', y: 'volts', degree: 1 },
	];
}

describe('Computing a note again after an edit', () => {
	test('gives what computing it for the first time gives', () => {
		fc.assert(
			fc.property(
				lines,
				limits,
				fc.array(edit, { maxLength: 8 }),
				(source, requirements, edits) => {
					const calculator = new Calculator();
					let now = source;
					let last = calculator.evaluate(cellsOf(now, requirements), defaultOptions);
					expect(last).toEqual(evaluate(cellsOf(now, requirements), defaultOptions));
					// What a peer knows that was told all of it once and then what changed.
					let told = asJson(last);
					for (const change of edits) {
						now = edited(now, change);
						const cells = cellsOf(now, requirements);
						const fresh = evaluate(cells, defaultOptions);
						const results = calculator.evaluate(cells, defaultOptions);
						expect(results).toEqual(fresh);
						told = applyChanges(told, asJson(changesBetween(last, results)));
						expect(told).toEqual(asJson(fresh));
						last = results;
					}
				},
			),
			{ numRuns: 600 },
		);
	});

	test('computes what depends on the edit and nothing else', () => {
		const calculator = new Calculator();
		const cells = (first: string): Cell[] => [
			{
				id: 'a',
				kind: 'calculation',
				source: `V1 = ${first}\nR1 = tolerance(1 kohm, 1 %)\nI1 = V1 / R1\nP1 = R1 * 2\nV2 = abs(V1) to V`,
			},
			{ id: 'q', kind: 'requirement', source: 'I1 <= 1 A\nR1 <= 2 kohm' },
		];
		const before = calculator.evaluate(cells('2 V'), defaultOptions);
		const after = calculator.evaluate(cells('3 V'), defaultOptions);
		expect(changed(before, after)).toEqual(['V1', 'I1', 'V2', 'requirement 1']);
		// V2 stays what it is, so that what would use it would not be computed either.
		const turned = calculator.evaluate(cells('-3 V'), defaultOptions);
		expect(changed(after, turned)).toEqual(['V1', 'I1', 'requirement 1']);
	});

	test('gives the same where a note has more second derivatives than are computed', () => {
		const inputs = Array.from({ length: 40 }, (_, i) => `R${i} = tolerance(${i + 1} kohm, 1 %)`);
		const stages = Array.from(
			{ length: 700 },
			(_, i) =>
				`V${i} = ${i === 0 ? '5 V' : `V${i - 1}`} * R${i % 40} / (R${i % 40} + R${(7 * i + 1) % 40})`,
		);
		const cells = (first: string): Cell[] => [
			{ id: 'a', kind: 'calculation', source: [...inputs, ...stages, first].join('\n') },
		];
		const calculator = new Calculator();
		for (const first of ['x1 = 1', 'x1 = sqrt(R0)', 'x1 = R0 * R1']) {
			const results = calculator.evaluate(cells(first), defaultOptions);
			expect(results).toEqual(evaluate(cells(first), defaultOptions));
			expect(results.quantities.V10?.remarks).toBeUndefined();
			expect(results.quantities.V699?.remarks?.[0]).toMatch(/^Second-order terms are not known/);
		}
	});
});

function asJson<T>(value: T): T {
	return JSON.parse(JSON.stringify(value)) as T;
}

/** Quantities and requirements that are not the same objects. */
function changed(before: Evaluation, after: Evaluation): string[] {
	return [
		...Object.keys(after.quantities).filter(
			(key) => before.quantities[key] !== after.quantities[key],
		),
		...after.requirements
			.filter((requirement, i) => requirement !== before.requirements[i])
			.map(({ line: row }) => `requirement ${row}`),
	];
}
