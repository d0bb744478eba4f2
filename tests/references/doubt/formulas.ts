import fc from 'fast-check';
import { normal } from '$lib/calc/doubt/distributions/normal';
import { rectangular } from '$lib/calc/doubt/distributions/rectangular';
import { Sheet, type Formula } from './sheet';

/** Estimates of the inputs that formulas are made of. */
export const names = ['p', 'q', 'r'];

/** Formulas that are smooth for positive inputs near 1, and the same as plain functions. */
export const smooth: fc.Arbitrary<Formula> = fc.letrec<{ formula: Formula }>((tie) => ({
	formula: fc.oneof(
		{ maxDepth: 4, withCrossShrink: true },
		fc.constantFrom<Formula>(...names),
		fc.double({ min: 0.5, max: 3, noNaN: true }),
		fc.tuple(
			fc.constantFrom('add', 'sub', 'mul', 'hypot', 'atan2'),
			tie('formula'),
			tie('formula'),
		) as fc.Arbitrary<Formula>,
		fc.tuple(
			fc.constantFrom('neg', 'sin', 'cos', 'atan', 'tanh'),
			tie('formula'),
		) as fc.Arbitrary<Formula>,
		// Kept inside their domains, and away from where they grow out of bounds.
		fc
			.tuple(fc.constantFrom('sqrt', 'log', 'log10', 'log2', 'cbrt'), tie('formula'))
			.map(([op, x]): Formula => [op as 'log', ['add', 1, ['powi', x, 2]]]),
		fc
			.tuple(
				fc.constantFrom('exp', 'expm1', 'sinh', 'cosh', 'asin', 'acos', 'tan', 'log1p'),
				tie('formula'),
			)
			.map(([op, x]): Formula => [op as 'exp', ['mul', 0.5, ['sin', x]]]),
		fc
			.tuple(tie('formula'), tie('formula'))
			.map(([x, y]): Formula => ['div', x, ['add', 1, ['powi', y, 2]]]),
		fc
			.tuple(tie('formula'), tie('formula'))
			.map(([x, y]): Formula => ['pow', ['add', 1, ['powi', x, 2]], ['sin', y]]),
	),
})).formula;

const unary: Record<string, (x: number) => number> = {
	neg: (x) => -x,
	abs: Math.abs,
	sqrt: Math.sqrt,
	cbrt: Math.cbrt,
	exp: Math.exp,
	expm1: Math.expm1,
	log: Math.log,
	log10: Math.log10,
	log2: Math.log2,
	log1p: Math.log1p,
	sin: Math.sin,
	cos: Math.cos,
	tan: Math.tan,
	asin: Math.asin,
	acos: Math.acos,
	atan: Math.atan,
	sinh: Math.sinh,
	cosh: Math.cosh,
	tanh: Math.tanh,
};
const binary: Record<string, (x: number, y: number) => number> = {
	add: (x, y) => x + y,
	sub: (x, y) => x - y,
	mul: (x, y) => x * y,
	div: (x, y) => x / y,
	pow: (x, y) => x ** y,
	powi: (x, y) => x ** y,
	hypot: Math.hypot,
	atan2: Math.atan2,
};

/** Value of a formula computed without a tape. */
export function directly(formula: Formula, at: Readonly<Record<string, number>>): number {
	if (typeof formula === 'number') return formula;
	if (typeof formula === 'string') return at[formula]!;
	if (formula.length === 2) return unary[formula[0]]!(directly(formula[1], at));
	return binary[formula[0]]!(directly(formula[1], at), directly(formula[2], at));
}

export const estimates = { p: 1.3, q: 0.8, r: 2.1 };
const widths = { p: 0.01, q: 0.02, r: 0.05 };

/** A sheet with three doubtful inputs, a formula, and a second line that uses it beside an input. */
export function sheetOf(formula: Formula): Sheet {
	return new Sheet()
		.input('p', estimates.p, rectangular(widths.p))
		.input('q', estimates.q, rectangular(widths.q))
		.input('r', estimates.r, normal(widths.r / 3))
		.line('first', formula)
		.line('second', ['mul', ['add', 'first', 'q'], ['add', 2, ['sin', 'first']]]);
}

export function secondOf(first: number, q: number): number {
	return (first + q) * (2 + Math.sin(first));
}
