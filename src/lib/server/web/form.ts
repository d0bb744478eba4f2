import { fail, type ActionFailure, type RequestEvent } from '@sveltejs/kit';
import { AppError, statusOf } from '$lib/errors';
import type { Blocker } from '$lib/schemas/review';
import type { z } from 'zod';
import type { Actor } from '../auth/access';
import { expected, toHttp } from './errors';
import { forMember } from './guard';

const secrets = ['password', 'present', 'next'] as const;

/** What a form gives back: which one it was, what was typed, and why it was not done. Never a password. */
type Refusal<S extends z.ZodObject> = Partial<
	Record<Exclude<keyof z.input<S> & string, (typeof secrets)[number]>, string>
> & { action: string; message: string; blockers?: Blocker[] };

/** Reads a form by its schema and does the deed. Mistakes and expected refusals return to the page. */
export async function submit<S extends z.ZodObject, T>(
	event: RequestEvent,
	action: string,
	schema: S,
	deed: (input: z.output<S>) => Promise<T>,
): Promise<T | ActionFailure<Refusal<S>>> {
	const typed = await fieldsOf(event.request);
	const kept = Object.fromEntries(
		Object.keys(schema.shape)
			.filter((name) => !secrets.some((secret) => secret === name) && name in typed)
			.map((name) => [name, typed[name]]),
	);
	const refuse = (status: number, message: string, blockers?: Blocker[]) =>
		fail(status, { ...kept, action, message, ...(blockers && { blockers }) } as Refusal<S>);

	const parsed = schema.safeParse(typed);
	if (!parsed.success) return refuse(400, parsed.error.issues.map((i) => i.message).join(' '));
	try {
		return await deed(parsed.data);
	} catch (thrown) {
		const failure = expected(thrown);
		if (!failure || failure.code === 'notFound') throw toHttp(thrown);
		const { code, message, details } = failure;
		return refuse(statusOf[code], message, details.blockers as Blocker[] | undefined);
	}
}

/** A form action for the signed-in person. */
export function action<S extends z.ZodObject, E extends RequestEvent, T>(
	name: string,
	schema: S,
	deed: (actor: Actor, input: z.output<S>, event: E) => Promise<T>,
) {
	return forMember((actor, event: E) =>
		submit(event, name, schema, (input) => deed(actor, input, event)),
	);
}

/** Reads a JSON body by its schema. Throws AppError `invalid`. */
export async function body<S extends z.ZodType>(
	{ request }: { request: Request },
	schema: S,
): Promise<z.output<S>> {
	if (!request.headers.get('content-type')?.startsWith('application/json')) {
		throw new AppError('invalid', 'Send JSON (content-type: application/json).');
	}
	const sent: unknown = await request.json().catch((cause: unknown) => {
		throw new AppError('invalid', 'The body is no JSON.', { cause });
	});
	const parsed = schema.safeParse(sent);
	if (parsed.success) return parsed.data;
	throw new AppError('invalid', parsed.error.issues.map((issue) => issue.message).join(' '));
}

async function fieldsOf(request: Request): Promise<Record<string, string>> {
	const form = await request.formData().catch((cause: unknown) => {
		throw toHttp(new AppError('invalid', 'This is no form.', { cause }));
	});
	const texts = [...form].filter((pair): pair is [string, string] => typeof pair[1] === 'string');
	return Object.fromEntries(texts);
}
