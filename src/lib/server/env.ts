import { AppError } from '$lib/errors';
import { z } from 'zod';

const settings = z.object({
	DATABASE_URL: z.string().regex(/^postgres(ql)?:\/\//, 'must be a postgresql:// address'),
	/** Public address of the installation; sign-in, forms and sockets accept no other. */
	ORIGIN: z.url({ protocol: /^https?$/, error: 'must be an http:// or https:// address' }),
	AUTH_SECRET: z.string().min(32, 'must have 32 characters or more'),
	HOST: z.string().default('127.0.0.1'),
	PORT: z.coerce.number().int().min(1).max(65535).default(4173),
	ROLES: z.string().default('web,sync,jobs'),
	/** Evaluator children per process. */
	EVALUATORS: z.coerce.number().int().min(1).max(32).default(2),
	/** File the evaluator children run. */
	EVALUATOR_ENTRY: z.string().default('build/evaluator.js'),
	/** File that the child runs which typesets PDFs. */
	TYPESETTER_ENTRY: z.string().default('build/typesetter.js'),
	/** File of the private key that signs the record; without it nothing can be signed. */
	SIGNING_KEY_FILE: z.string().default(''),
	/** Folder outside the database that keeps the record's checkpoints; none where it is empty. */
	CHECKPOINT_FOLDER: z.string().default(''),
	/** Header with the client's address, set by a trusted proxy; empty where there is none. */
	ADDRESS_HEADER: z.string().default(''),
	/** Mail server; no mail goes out where it is empty. */
	SMTP_URL: z
		.string()
		.regex(/^(smtps?:\/\/\S+)?$/, 'must be an smtp:// or smtps:// address')
		.default(''),
	/** Who mail comes from: an address, or a name with the address in angle brackets. */
	MAIL_FROM: z.string().default('Halfdigit <halfdigit@localhost>'),
	LOG_LEVEL: z.enum(['debug', 'info', 'warn', 'error', 'silent']).default('info'),
});

export type Settings = z.infer<typeof settings>;

let read: Settings | undefined;

/** The process's settings, read once. Throws AppError `invalid` that names each wrong variable and the mend. */
export function env(): Settings {
	if (read) return read;
	const parsed = settings.safeParse(process.env);
	if (!parsed.success) {
		const lines = parsed.error.issues.map((issue) => `${issue.path.join('.')}: ${issue.message}`);
		throw new AppError(
			'invalid',
			`Settings are missing or wrong (see .env.example).\n${lines.join('\n')}`,
		);
	}
	return (read = parsed.data);
}
