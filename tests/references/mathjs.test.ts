import * as fc from 'fast-check';
import { all, create, isUnit } from 'mathjs';
import { describe, expect, it } from 'vitest';
import { functions } from '$lib/calc/functions/registry';
import { compute } from '../support/notes';
import { kinds, typedFormulas } from '../support/typed-formulas';

// The whole of mathjs, with its own units and arithmetic, none of which the engine computes with.
const math = create(all!);

/** What mathjs gives for a formula as a number in a unit, '1' for none; undefined where it has no such value. */
function theirs(source: string, unit: string): number | undefined {
	try {
		const value: unknown = math.evaluate(source);
		if (typeof value === 'number') return unit === '1' ? value : undefined;
		if (!isUnit(value) || unit === '1') return undefined;
		const number: unknown = value.toNumber(unit);
		return typeof number === 'number' ? number : undefined;
	} catch {
		return undefined;
	}
}

/** What the language gives; undefined where it asks to write a formula clearer, as `1 / 5 Hz`. */
function ours(source: string) {
	const { quantities, errors } = compute(`x = ${source}`);
	if (errors.some(({ code }) => code === 'ambiguous')) return undefined;
	expect(errors, source).toEqual([]);
	return quantities.x;
}

function expectClose(value: number, other: number, tolerance: number, source: string): void {
	const off = Math.abs(value - other);
	expect(off, `${source}: ${value} beside ${other}`).toBeLessThanOrEqual(tolerance);
}

describe('mathjs by itself', () => {
	it('gives the value of every example of the handbook that it can compute', () => {
		const compared = [...functions.values()].flatMap(({ name, examples }) =>
			examples.flatMap(({ source }) => {
				if (source.includes('\n')) return [];
				const { value = null, unit = '1' } = ours(source) ?? {};
				const other = theirs(source, unit);
				if (value === null || other === undefined) return [];
				expectClose(value, other, 1e-14 * (1 + Math.abs(other)), source);
				return [name];
			}),
		);
		expect(new Set(compared).size).toBeGreaterThan(30);
	});

	it.each(kinds)('gives the value of 200 random formulas in %s', (kind) => {
		const known = fc
			.sample(typedFormulas[kind], { numRuns: 3_000, seed: 1795 })
			.flatMap(({ source, largest }) => {
				const other = theirs(source, kind);
				// Roots of negative values are not numbers here, and complex there.
				if (other === undefined || !Number.isFinite(largest)) return [];
				return [{ source, largest, other }];
			})
			.sort((a, b) => b.source.length - a.source.length);
		const compared = known.slice(0, 400).flatMap(({ source, largest, other }) => {
			const value = ours(kind === '1' ? source : `number(${source}, ${kind})`)?.value;
			if (value === undefined || value === null) return [];
			expectClose(value, other, 1e-11 * largest, source);
			return [source];
		});
		expect(compared.length).toBeGreaterThanOrEqual(200);
	});
});
