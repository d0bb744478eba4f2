import * as fc from 'fast-check';
import { parseUnit } from '$lib/calc/language/parse-line';
import { functions } from '$lib/calc/functions/registry';
import { symbolTexts } from '$lib/calc/units/table';

/** A piece of a formula: as it is typed where a base unit is so many times as large. */
export type Piece = (scale: Scale) => string;

/** A base unit, by its place among kg, m, s, A, K, cd, mol and bit, and how many of the old ones are a new one. */
export interface Scale {
	base: number;
	factor: number;
}

/** Nothing scaled. */
export const plain: Scale = { base: 0, factor: 1 };

/** How much the numbers in a unit grow. */
export function growth(unit: string, { base, factor }: Scale): number {
	return unit === '1' ? 1 : factor ** (parseUnit(unit).dimension.powers[base] ?? 0);
}

const symbols = [...symbolTexts(), 'V/s', 'mV/degC', 'V*s', 'ohm/K', 'A*h', 'ppm/K', 'm/s^2'];
const unit = fc.constantFrom(...symbols);
const number = fc.oneof(
	{ weight: 6, arbitrary: fc.integer({ min: 1, max: 999 }) },
	{ weight: 3, arbitrary: fc.integer({ min: 1, max: 9_999 }).map((n) => n / 128) },
	{ weight: 1, arbitrary: fc.constantFrom(0, 1e-12, 1e12, 1e300, 1e-300, 0.1, 12) },
);
const series = fc.constantFrom('E3', 'E24', 'E96', 'E192');
const text = fc.constantFrom(
	...['K', 'power', 'cubic', '4k7', '4p7', '10n', 'R47', 'red red red', 'constructor'],
	...['__proto__', '', '50 %', '😀', 'toString', 'E24', '{{a}}', '<b>'],
);
const name = fc.constantFrom('a', 'b', 'c', 'f', 'pi', 'boltzmann', 'missing');
const operator = fc.constantFrom(
	...['+', '-', '*', '/', '^', '.*', './', '.^', 'mod', 'and', 'or', 'xor'],
	...['<', '<=', '==', '!=', ':', ' '],
);

function piece(source: string): Piece {
	return () => source;
}

const quantity = fc.tuple(number, unit).map(([n, of]): Piece => {
	return (scale) => `${String(n * growth(of, scale))} ${of}`;
});

const depth = fc.createDepthIdentifier();

/** Formulas of the whole language, right or wrong: every function, unit and operator. */
export const anyFormula = fc.letrec<{ formula: Piece }>((tie) => {
	const inner = tie('formula');
	const leaf = fc.oneof(
		{ weight: 6, arbitrary: quantity },
		{ weight: 2, arbitrary: number.map((n) => piece(String(n))) },
		{ weight: 2, arbitrary: name.map(piece) },
		{ weight: 1, arbitrary: text.map((characters) => piece(`"${characters}"`)) },
		{ weight: 1, arbitrary: series.map(piece) },
		{ weight: 1, arbitrary: fc.constantFrom('true', 'false').map(piece) },
	);
	const list = fc.array(inner, { minLength: 1, maxLength: 3 }).map((items): Piece => {
		return (scale) => `[${items.map((item) => item(scale)).join(', ')}]`;
	});
	const values = fc.array(fc.oneof({ weight: 3, arbitrary: leaf }, inner), { maxLength: 5 });
	const call = fc
		.tuple(fc.constantFrom(...functions.keys(), 'f', 'missing'), values, unit)
		.map(([called, args, of]): Piece => {
			const unitAt = functions.get(called)?.unitAt;
			return (scale) =>
				`${called}(${args.map((arg, i) => (i === unitAt ? of : arg(scale))).join(', ')})`;
		});
	const binary = fc.tuple(inner, operator, inner).map(([left, op, right]): Piece => {
		return (scale) => `(${left(scale)}) ${op} (${right(scale)})`;
	});
	const other = fc
		.tuple(
			fc.constantFrom('-(_)', 'not (_)', '(_)!', '(_)[1]', '(_) to ^', '((_) * #) ^', '(_)'),
			inner,
			unit,
		)
		.map(([shape, value, of]): Piece => {
			return (scale) =>
				shape
					.replace('#', () => String(growth(of, scale)))
					.replace('^', () => of)
					.replace('_', () => value(scale));
		});
	const choice = fc.tuple(inner, inner, inner).map(([condition, yes, no]): Piece => {
		return (scale) => `(${condition(scale)}) < 1 ? (${yes(scale)}) : (${no(scale)})`;
	});
	return {
		formula: fc.oneof(
			{ maxDepth: 4, depthIdentifier: depth, depthSize: 'small', withCrossShrink: true },
			leaf,
			{ weight: 3, arbitrary: call },
			{ weight: 2, arbitrary: binary },
			list,
			other,
			choice,
		),
	};
}).formula;

/** The examples of the handbook and others, each with a few pieces cut out, put in or put for others. */
export function mutated(sources: readonly string[]): fc.Arbitrary<string> {
	const strange = fc.oneof(
		fc.constantFrom(...'()[],:;?="\'`#{}.^*/+-%!<>&|~\\@$° \u00a0\u2212'),
		fc.constantFrom(
			'1e308',
			'0',
			'-1',
			'1e-320',
			'NaN',
			'1e999',
			'"',
			'""',
			'..',
			'^^',
			'[[',
			'==',
		),
		fc.constantFrom(...symbols, ...functions.keys(), 'E24', 'true', 'mod', 'to', 'constructor'),
		fc.string({ unit: 'binary', maxLength: 3 }),
	);
	const change = fc.tuple(fc.nat(200), fc.nat(4), strange);
	return fc
		.tuple(fc.constantFrom(...sources), fc.array(change, { minLength: 1, maxLength: 4 }))
		.map(([source, changes]) =>
			changes.reduce((line, [place, cut, put]) => {
				const at = place % (line.length + 1);
				return line.slice(0, at) + put + line.slice(at + cut);
			}, source),
		)
		.map((line) => line.replace(/\n/g, ' '));
}
