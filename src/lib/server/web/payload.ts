import { AppError } from '$lib/errors';
import type { z } from 'zod';

/** Bytes of a body; below the bound of the HTTP server itself (BODY_SIZE_LIMIT). */
const maxBytes = 500_000;

/** Faults that are named; a body may have many more. */
const maxFaults = 20;

/**
 * Reads a script's JSON body by its schema. Throws AppError `tooLarge`, or `invalid` with `faults`: the place of each
 * in the body, as in `cells[2].source`, and what is wrong there.
 */
export async function payload<S extends z.ZodType>(
	{ request }: { request: Request },
	schema: S,
): Promise<z.output<S>> {
	if (!/^application\/json\b/i.test(request.headers.get('content-type') ?? '')) {
		throw new AppError('invalid', 'Send JSON (content-type: application/json).');
	}
	const sent = parse(await textOf(request));
	const parsed = schema.safeParse(sent);
	if (parsed.success) return parsed.data;
	const all = parsed.error.issues.flatMap(toFaults);
	const faults = all.slice(0, maxFaults);
	const more = all.length > maxFaults ? ` And ${all.length - maxFaults} more.` : '';
	const sentences = faults.map(({ place, message }) => `${place}: ${message}.`).join(' ');
	throw new AppError('invalid', sentences + more, { details: { faults } });
}

async function textOf(request: Request): Promise<string> {
	const bytes = await request.arrayBuffer().catch((cause: unknown) => {
		if (cause instanceof Error && 'status' in cause && cause.status === 413) throw tooLarge(cause);
		throw new AppError('invalid', 'The body did not arrive whole.', { cause });
	});
	if (bytes.byteLength > maxBytes) throw tooLarge();
	return new TextDecoder().decode(bytes);
}

function tooLarge(cause?: unknown): AppError {
	return new AppError('tooLarge', `The body has at most ${maxBytes / 1000} kB.`, { cause });
}

function parse(text: string): unknown {
	try {
		return JSON.parse(text);
	} catch (cause) {
		const why = cause instanceof Error ? cause.message : '';
		throw new AppError('invalid', `The body is no JSON (${why}).`, { cause });
	}
}

function toFaults(issue: z.core.$ZodIssue): { place: string; message: string }[] {
	if (issue.code === 'unrecognized_keys') {
		return issue.keys.map((key) => ({
			place: placeOf([...issue.path, key]),
			message: 'is not known here',
		}));
	}
	return [{ place: placeOf(issue.path), message: issue.message }];
}

function placeOf(path: readonly PropertyKey[]): string {
	const place = path
		.map((part) => (typeof part === 'number' ? `[${part}]` : `.${String(part).slice(0, 100)}`))
		.join('');
	return place.replace(/^\./, '') || 'body';
}
