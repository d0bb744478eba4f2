import * as fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { compute, requirement, text } from '../../../tests/support/notes';

/** Formulas that may be right or wrong: names, numbers, units, operators and brackets in random order. */
const pieces = fc.constantFrom(
	...['a', 'b', 'c', 'Vin', 'R_1', 'x', 'V', 'mV', 'kohm', 'degC', '%', 's', 'E24', 'pi', 'true'],
	...['1', '2.5', '.5', '1e3', '1e400', '0', '+', '-', '*', '/', '^', '!', '(', ')', '[', ']', ','],
	...[':', ';', '?', '=', '==', '<', '<=', 'to', 'in', 'mod', 'not', 'and', 'sqrt(', 'min(', 'f('],
	...[
		'preferred(',
		'.*',
		'./',
		'#',
		'"',
		"'",
		'.',
		'{',
		'}',
		'°',
		'Ω',
		'µ',
		' ',
		'\u00a0',
		'😀',
		'@',
	],
);
const formula = fc.array(pieces, { maxLength: 14 }).map((parts) => parts.join(' '));
const line = fc.oneof(
	formula,
	fc
		.tuple(fc.constantFrom('a', 'b', 'c', 'x', 'f(x)', 'V'), formula)
		.map(([n, f]) => `${n} = ${f}`),
	fc.string({ unit: 'binary', maxLength: 30 }),
);

/** A line of a note that holds together: each quantity uses earlier ones. */
const chain = fc.array(fc.tuple(fc.nat(), fc.nat(), fc.constantFrom('+', '-')), {
	minLength: 1,
	maxLength: 12,
});

describe('Any note', () => {
	it('is evaluated without throwing, with each fault inside its line', () => {
		fc.assert(
			fc.property(
				fc.array(line, { maxLength: 8 }),
				formula,
				fc.string(),
				(lines, limit, quoted) => {
					const source = lines.join('\n');
					const { errors, lines: worked } = compute(
						source,
						requirement(limit),
						text(`{{${quoted}}}`),
					);
					expect(worked).toHaveLength(source.split('\n').length);
					for (const { cell, line: number, from, to } of errors) {
						if (cell === 'text') continue;
						const row = (cell === 'req' ? limit : source).split('\n')[number - 1] ?? '';
						expect(from).toBeGreaterThanOrEqual(0);
						expect(to).toBeGreaterThanOrEqual(from);
						expect(to).toBeLessThanOrEqual(row.length);
					}
				},
			),
			{ numRuns: 1500 },
		);
	});

	it('gives a number or a fault for every formula, never neither', () => {
		fc.assert(
			fc.property(formula, (source) => {
				const { lines, errors } = compute(source);
				const [only] = lines;
				const silent = ['blank', 'comment', 'function'].includes(only?.kind ?? '');
				if (!silent) expect(only?.readout !== undefined || errors.length > 0).toBe(true);
			}),
			{ numRuns: 1500 },
		);
	});

	it('gives the same figures whatever the order of its lines', () => {
		fc.assert(
			fc.property(chain, fc.infiniteStream(fc.nat()), (steps, random) => {
				const lines = steps.map(([left, right, op], i) =>
					i === 0 ? 'q0 = 1.25 V' : `q${i} = q${left % i} ${op} 0.5 * q${right % i}`,
				);
				const mixed = lines
					.map((source) => ({ source, key: Number(random.next().value) }))
					.sort((a, b) => a.key - b.key)
					.map(({ source }) => source);
				const inOrder = compute(lines.join('\n'));
				const shuffled = compute(mixed.join('\n'));
				expect(inOrder.errors).toEqual([]);
				expect(shuffled.errors).toEqual([]);
				for (const [name, quantity] of Object.entries(inOrder.quantities))
					expect(shuffled.quantities[name]?.value).toBe(quantity.value);
			}),
			{ numRuns: 300 },
		);
	});

	it('is computed the same when it is computed again', () => {
		fc.assert(
			fc.property(fc.array(line, { maxLength: 6 }), (lines) => {
				const source = lines.join('\n');
				expect(compute(source)).toEqual(compute(source));
			}),
			{ numRuns: 300 },
		);
	});
});
