/** What an expected failure is about. Compared by code, never by message. */
export type ErrorCode =
	| 'invalid'
	| 'unauthenticated'
	| 'forbidden'
	| 'notFound'
	| 'conflict'
	| 'blocked'
	| 'tooLarge'
	| 'tooMany'
	| 'unavailable';

/** An expected failure with a sentence a stranger understands. `details` holds what a page shows beside it. */
export class AppError extends Error {
	readonly code: ErrorCode;
	readonly details: Readonly<Record<string, unknown>>;

	constructor(
		code: ErrorCode,
		message: string,
		options: { cause?: unknown; details?: Record<string, unknown> } = {},
	) {
		super(message, { cause: options.cause });
		this.name = 'AppError';
		this.code = code;
		this.details = options.details ?? {};
	}
}

/** HTTP status of each code. */
export const statusOf: Readonly<Record<ErrorCode, number>> = {
	invalid: 400,
	unauthenticated: 401,
	forbidden: 403,
	notFound: 404,
	conflict: 409,
	blocked: 409,
	tooLarge: 413,
	tooMany: 429,
	unavailable: 503,
};
