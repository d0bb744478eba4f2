import { describe, expect, it } from 'vitest';
import { calculation, compute, shown } from '../../../tests/support/notes';
import { parseLine } from './language/parse-line';

/** Ways out of the formula language, known from this and other evaluators. None may give a value. */
const escapes = [
	'evaluate("1 + 1")',
	'parse("x")',
	'compile("1")',
	'parser()',
	'createUnit("foo")',
	'import({a: 1})',
	'config({number: "BigNumber"})',
	'simplify("x + x")',
	'simplify(x + x)',
	'derivative("x^2", "x")',
	'derivative(x^2, x)',
	'rationalize(x)',
	'resolve(x)',
	'chain(3)',
	'typed("f", {})',
	'help(sin)',
	'print("$x", {})',
	'format(3)',
	'reviver()',
	'replacer()',
	'unit("5 V")',
	'eval("1")',
	'Function("return process")()',
	'constructor',
	'constructor("return process")()',
	'constructor.constructor("return process")()',
	'sin.constructor',
	'sqrt.apply(1)',
	'"".constructor',
	"''.constructor",
	'`x`',
	'"x".length',
	'"x"["constructor"]',
	'"x"["__proto__"]["polluted"]',
	'"x"[1]',
	'"x".replace("x", "y")',
	'"constructor"("return process")()',
	'["constructor"]',
	'{"constructor": 1}["constructor"]',
	'"\\u0061"',
	'"\\"; 1; "',
	'"a" + "b"',
	'"a" == "a"',
	'sin["constructor"]',
	'f("constructor")',
	'"x"(1)',
	'"x" = 1',
	'"x"(y) = 1',
	'"a"\'',
	'[].constructor',
	'[1].map',
	'{a: 1}',
	'{}.constructor',
	'x["constructor"]',
	'[1]["constructor"]',
	'f.constructor = 3',
	'__proto__',
	'__proto__ = 3',
	'__defineGetter__(1)',
	'prototype = 2',
	'toString()',
	'valueOf()',
	'hasOwnProperty(1)',
	'this',
	'globalThis',
	'process',
	'process.exit(1)',
	'require("fs")',
	'import("fs")',
	'global',
	'window',
	'cellRange(1)',
	'f(x) = g(y) = 2',
	'a = b = 3',
	'x[1] = 2',
	'x = {}',
	'1; 2',
	'x = 1; y = 2',
	'map([1, 2], f(x) = x)',
	'x?.y',
	'x ?? 1',
	'1 | 2',
	'~1',
	'null',
	'undefined',
	'NaN',
	'Infinity',
	'-Infinity',
	'$x = 1',
	'\\u0078 = 1',
];

/** Formulas that would take the time or the memory of the process. Each names the bound it meets. */
const bombs: [name: string, source: string, code: string][] = [
	['a range of a thousand million', '1:1e9', 'tooLarge'],
	['a range without an end in sight', '0:1e-300:1', 'tooLarge'],
	['a range in a list', '[1:1e9]', 'tooLarge'],
	['a range times itself', '(1:1e9) * (1:1e9)', 'tooLarge'],
	['a function that calls itself', 'f(x) = f(x)\nf(1)', 'tooDeep'],
	['two functions that call each other', 'f(x) = q(x)\nq(x) = f(x)\nf(1)', 'tooDeep'],
	[
		'a function with a long body that calls itself',
		`f(x) = f(x)${' + 1'.repeat(400)}\nf(1)`,
		'tooDeep',
	],
	[
		'a function that calls itself twice',
		'f(n) = n < 2 ? n : f(n - 1) + f(n - 2)\nf(90)',
		'tooLong',
	],
	[
		'functions that double the work of each other',
		`f0(x) = x + x\n${Array.from({ length: 60 }, (_, i) => `f${i + 1}(x) = f${i}(x) + f${i}(x)`).join('\n')}\nf60(1)`,
		'tooLong',
	],
	['many factorials', 'max(((1:90000) * 0 + 170)!)', 'tooLong'],
	['a power out of range', '9^9^9', 'overflow'],
	['a factorial out of range', '171!', 'overflow'],
	['a factorial of a huge number', '(1e300)!', 'overflow'],
	['a number out of range', '1e400', 'overflow'],
	['a number out of range in its unit', '1e300 MWh', 'overflow'],
	['a conversion out of range', '1e300 J to eV', 'overflow'],
	['a number too small to compute with', '1e-400', 'overflow'],
	['a number too small in its unit', '1e-300 nV', 'overflow'],
	['an exponential out of range', 'exp(1000)', 'overflow'],
	['brackets without end', `${'('.repeat(900)}1${')'.repeat(900)}`, 'tooDeep'],
	['calls without end', `${'sin('.repeat(200)}1${')'.repeat(200)}`, 'tooDeep'],
	['lists without end', `${'['.repeat(900)}1${']'.repeat(900)}`, 'tooDeep'],
	['signs without end', `${'-'.repeat(1900)}1`, 'tooDeep'],
	['negations without end', `${'not '.repeat(400)}true`, 'tooDeep'],
	['powers without end', `2${'^2'.repeat(900)}`, 'tooDeep'],
	['choices without end', `${'1 > 0 ? '.repeat(200)}1`, 'tooDeep'],
	['a line of 10 000 characters', '1+'.repeat(5000), 'tooLarge'],
	['a text of 1000 characters', `"${'x'.repeat(1000)}"`, 'tooLarge'],
	['a name of 10 000 characters', 'x'.repeat(10_000), 'tooLarge'],
	['a matrix that does not exist', 'zeros(1e5, 1e5)', 'unknownName'],
	['random numbers', 'random(1e9)', 'unknownName'],
	['a million decimals', 'round(1, 1e6)', 'value'],
];

describe('The formula language', () => {
	it.each(escapes)('gives nothing away for %s', (source) => {
		const { lines, errors } = compute(source);
		expect(errors.length).toBeGreaterThan(0);
		expect(lines.every((line) => line.readout === undefined)).toBe(true);
	});

	it.each(bombs)('stops at %s', (_, source, code) => {
		expect(shown(source)).toBe(code);
	});

	it('computes the next note as if nothing had been', () => {
		for (const source of escapes) compute(source);
		expect(shown('3 V / 2 A')).toBe('1.5 Ω');
		expect(({} as Record<string, unknown>).polluted).toBeUndefined();
		expect(Object.keys(Object.prototype)).toEqual([]);
	});

	it('keeps what a function bound to itself', () => {
		const { errors } = compute('f(x) = y\nq(y) = f(1)\nq(2)');
		expect(errors[0]).toMatchObject({ line: 1, code: 'unknownName' });
	});

	it('lets a function use itself where it ends', () => {
		expect(shown('fact(n) = n <= 1 ? 1 : n * fact(n - 1)\nfact(20)')).toBe('2.4329 × 10¹⁸');
	});

	it('reads a long sum and signs that cancel', () => {
		expect(shown(`1${' + 1'.repeat(480)}`)).toBe('481');
		expect(shown('1!!!!!!!!!!')).toBe('1');
	});
});

describe('A note beyond its bounds', () => {
	it('is refused in the cell that goes beyond them', () => {
		const { errors, quantities } = compute('a = 1', calculation('x\n'.repeat(5001), 'big'));
		expect(errors).toMatchObject([{ cell: 'big', line: 1, code: 'tooLarge' }]);
		expect(quantities.a?.value).toBe(1);
	});

	it('ends with the lines that its operations do not reach', () => {
		const lines = Array.from({ length: 40 }, (_, i) => `v${i} = sum((1:40000) * 2)`);
		const { errors, quantities } = compute(lines.join('\n'));
		expect(errors.length).toBeGreaterThan(0);
		expect(new Set(errors.map(({ code }) => code))).toEqual(new Set(['tooLong']));
		expect(quantities.v0?.value).toBe(1_600_040_000);
	});

	it('ends although lines with the names of units wait for one another', () => {
		expect(compute('V = V').errors.map(({ code }) => code)).toEqual(['reserved']);
		const { errors } = compute('V = A\nA = V\nx = V');
		expect(errors.map(({ code }) => code)).toEqual([
			'reserved',
			'waits',
			'reserved',
			'waits',
			'waits',
		]);
	});

	it('names a long circle by its beginning', () => {
		const names = Array.from({ length: 500 }, (_, i) => `v${i} = v${(i + 1) % 500}`);
		const { errors } = compute(names.join('\n'));
		expect(errors).toHaveLength(500);
		expect(errors[0]?.message).toBe(
			'The definitions go in a circle: v0 → v1 → v2 → v3 → v4 → … → v0.',
		);
	});

	it('suggests names for its first unknown ones only', () => {
		const known = Array.from({ length: 900 }, (_, i) => `value_${i} = 1`);
		const wrong = Array.from({ length: 900 }, (_, i) => `valeu_${i}`);
		const { errors } = compute([...known, ...wrong].join('\n'));
		expect(errors).toHaveLength(900);
		expect(errors.filter(({ mend }) => mend !== undefined).length).toBeLessThan(50);
	});
});

describe('A parsed line', () => {
	it('is remembered by its text', () => {
		expect(parseLine('remembered = 1 V')).toBe(parseLine('remembered = 1 V'));
	});
});
