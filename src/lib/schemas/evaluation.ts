import { maxSourceLength } from '$lib/note/document';
import { z } from 'zod';
import type { Cell, Options } from '$lib/calc/results';

const name = z.string().min(1, 'must not be empty').max(100, 'has at most 100 characters');
const id = z
	.string()
	.regex(/^[A-Za-z0-9_-]{1,40}$/, 'has 1 to 40 letters, digits, hyphens and underscores');
const figures = z.array(z.number('must be a number')).max(10_000, 'has at most 10 000 numbers');

const sourceCell = z.strictObject({
	id,
	kind: z.enum(['text', 'calculation', 'requirement']),
	source: z.string().max(maxSourceLength, `has at most ${maxSourceLength} characters`),
});

const column = z.strictObject({
	name,
	unit: z.string().max(100, 'has at most 100 characters'),
	values: figures,
	uncertainties: figures.optional(),
});

const readingsCell = z.strictObject({
	id,
	kind: z.literal('readings'),
	columns: z.array(column).max(50, 'has at most 50 columns'),
});

const curveCell = z.strictObject({
	id,
	kind: z.literal('curve'),
	name,
	x: name,
	y: name,
	degree: z.int('must be a whole number').min(1, 'is at least 1').max(10, 'is at most 10'),
	weighted: z.boolean().optional(),
});

const sweepCell = z.strictObject({
	id,
	kind: z.literal('curve'),
	source: z.string().max(maxSourceLength, `has at most ${maxSourceLength} characters`),
});

const otherCell = z.discriminatedUnion('kind', [sourceCell, readingsCell, curveCell]);

/** A curve is a line of words where it has a source, and a fit otherwise. */
const cell = z.unknown().transform((sent, context): Cell => {
	const isSweep = z
		.object({ kind: z.literal('curve'), source: z.unknown() })
		.safeParse(sent).success;
	const parsed = (isSweep ? sweepCell : otherCell).safeParse(sent);
	if (parsed.success) return parsed.data;
	for (const issue of parsed.error.issues)
		context.issues.push({ ...issue, input: sent } as z.core.$ZodRawIssue);
	return z.NEVER;
});

const cells = z
	.array(cell)
	.max(1000, 'has at most 1 000 cells')
	.superRefine((all, context) => {
		const seen = new Set<string>();
		for (const [index, cell] of all.entries()) {
			if (seen.has(cell.id)) {
				const message = `is the id of an earlier cell, "${cell.id}"`;
				context.addIssue({ code: 'custom', path: [index, 'id'], message });
			}
			seen.add(cell.id);
		}
	});

const monteCarlo = z.strictObject({
	quantities: z.array(name).min(1, 'names a quantity').max(20, 'names at most 20 quantities'),
	trials: z
		.int('must be a whole number')
		.min(1e3, 'is at least 1 000')
		.max(1e7, 'is at most 10 000 000')
		.optional(),
	adaptive: z.boolean().optional(),
	seed: z.int('must be a whole number').min(0, 'must not be negative').default(1),
});

const options = z.strictObject({
	coverage: z.number().gt(0, 'is above 0').lt(1, 'is below 1').default(0.95),
	decisionRule: z.enum(['simple', 'guarded']).default('guarded'),
	detail: z
		.union([z.literal('all'), z.array(name).max(1000)], 'must be "all" or a list of names')
		.default('all'),
	monteCarlo: monteCarlo.optional(),
});

/** What a script asks to be computed: cells as the engine reads them, and options that have defaults. */
export const evaluationRequest = z.strictObject({
	cells,
	options: options.prefault({}),
}) satisfies z.ZodType<{ cells: Cell[]; options: Options }>;
