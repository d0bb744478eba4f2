import * as fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { anyFormula, growth, mutated, plain } from '../../../tests/support/formulas';
import { compute } from '../../../tests/support/notes';
import { kinds, typedFormulas } from '../../../tests/support/typed-formulas';
import { functions } from './functions/registry';
import { parseUnit } from './language/parse-line';
import type { Evaluation } from './results';
import { findSymbol } from './units/table';

/** Names that any formula may use. */
const before = 'a = 3.25 V\nb = normal(2 kohm, 1 ohm)\nc = [1, 2, 3] mA\nf(x) = 2 * x\n';
const known = before.split('\n').length - 1;

/** Everything that must hold of any line, right or wrong. */
function expectSound(source: string, { lines, errors, quantities }: Evaluation): void {
	const line = lines[known];
	const silent = ['blank', 'comment', 'function'].includes(line?.kind ?? '');
	if (!silent) expect((line?.readout === undefined) === errors.length > 0, source).toBe(true);
	const text = line?.readout?.text ?? '';
	if (!source.includes('"')) expect(text).not.toMatch(/NaN|Infinity|undefined|object|function/);
	for (const { value, values = [], standardUncertainty = 0 } of Object.values(quantities)) {
		for (const number of [value ?? 0, ...values, standardUncertainty])
			expect(Number.isFinite(number), `${source} gives ${number}`).toBe(true);
	}
	for (const { from, to } of errors) {
		expect(from).toBeGreaterThanOrEqual(0);
		expect(to).toBeGreaterThanOrEqual(from);
		expect(to).toBeLessThanOrEqual(source.length);
	}
	expect(Object.keys(Object.prototype)).toEqual([]);
	const written = JSON.stringify({ lines, errors, quantities });
	expect(JSON.stringify(JSON.parse(written))).toBe(written);
}

/** Functions and constants with numbers of their own that have units: a change of units shows. */
const absolute =
	/\b(bands\w*|rkm\w*|pt\w*|thermocouple\w*|ntcBeta\w*|steinhart\w*|dBV|dBm|johnson|find\w+|number|preferred\w*|round|floor|ceil|fix|boltzmann)\b|deg[CF]/;

describe('A formula of the whole language', () => {
	it('gives a finite value or a fault, and the same in other units', { timeout: 20_000 }, () => {
		fc.assert(
			fc.property(anyFormula, fc.nat(4), (formula, base) => {
				const source = `x = ${formula(plain)}`;
				const result = compute(before + source);
				expectSound(source, result);
				if (absolute.test(source) || source.length > 1000) return;
				// A power of two that is a square and a cube: nothing is rounded otherwise.
				const scale = { base, factor: 64 };
				const given = before
					.replace('3.25', String(3.25 * growth('V', scale)))
					.replace('2 k', `${String(2 * growth('ohm', scale))} k`)
					.replace('1 ohm', `${String(growth('ohm', scale))} ohm`)
					.replace('] mA', `] * ${String(growth('A', scale))} mA`);
				const scaled = compute(`${given}x = ${formula(scale)}`);
				const [one, other] = [result.quantities.x, scaled.quantities.x];
				if (!one || !other) return;
				expect(other.unit).toBe(one.unit);
				const grown = growth(one.unit, scale);
				for (const key of ['value', 'standardUncertainty'] as const) {
					const [small, large] = [one[key], other[key]];
					if (typeof small !== 'number' || typeof large !== 'number') continue;
					// Numbers this small have lost digits on the way.
					if (Math.abs(small) < 1e-280 || Math.abs(large) < 1e-280) continue;
					expect(
						Math.abs(large - small * grown),
						`${source}: ${small}, ${large}`,
					).toBeLessThanOrEqual(1e-6 * Math.abs(large));
				}
			}),
			{ numRuns: 4_000 },
		);
	});

	it('is refused or computed as an example with slips is', { timeout: 20_000 }, () => {
		const examples = [...functions.values()].flatMap(({ examples: own }) =>
			own.map((example) => example.source),
		);
		const escapes = ['"".constructor', 'sin.constructor', 'x["__proto__"]', 'f(x) = x', '1:1e9'];
		fc.assert(
			fc.property(mutated([...examples, ...escapes]), (source) => {
				expectSound(source, compute(before + source));
			}),
			{ numRuns: 4_000 },
		);
	});

	it('has the value and the unit found by hand where its units fit', { timeout: 20_000 }, () => {
		const any = fc.oneof(
			...kinds.map((kind) => typedFormulas[kind].map((worked) => ({ kind, ...worked }))),
		);
		fc.assert(
			fc.property(any, ({ kind, source, value, largest }) => {
				const { quantities, errors } = compute(`x = ${source}`);
				if (!Number.isFinite(largest) || source.length > 1_900) return;
				const codes = errors.map(({ code }) => code);
				expect(codes, source).not.toContain('dimension');
				const found = quantities.x;
				// A level of a ratio or power below zero, a root of a negative value: refused, by hand not a number.
				if (!found) return void expect(codes.length, source).toBe(1);
				const dimension = kind === '1' ? '' : findSymbol(kind)?.dimension.key;
				const unit = parseUnit(found.unit === '1' ? '1 V/V' : found.unit);
				if (kind !== '1') expect(unit.dimension.key, source).toBe(dimension);
				else expect(found.unit, source).toBe('1');
				expect(Math.abs((found.value ?? NaN) - value), source).toBeLessThanOrEqual(
					1e-9 * Math.max(Math.abs(value), 1e-6 * largest),
				);
			}),
			{ numRuns: 2_000 },
		);
	});
});
