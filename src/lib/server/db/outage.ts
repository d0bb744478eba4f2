const codes =
	/^(ECONN\w+|EPIPE|ETIMEDOUT|EHOSTUNREACH|ENOTFOUND|EAI_AGAIN|57P0[123]|53[0-9A-Z]{3}|08[0-9A-Z]{3})$/;
const sentences =
	/timeout exceeded when trying to connect|connection terminated|connection timeout/i;

/** Whether a failure means that the database cannot serve just now, rather than that something is wrong with the question. */
export function isOutage(thrown: unknown): boolean {
	for (let error = thrown; error instanceof Error; error = error.cause) {
		if ('code' in error && typeof error.code === 'string' && codes.test(error.code)) return true;
		if (sentences.test(error.message)) return true;
	}
	return false;
}
