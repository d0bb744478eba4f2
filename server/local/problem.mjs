/** A failure with a sentence that tells a stranger what to do; shown without a stack. */
export class Problem extends Error {
	/** @param {string} message */
	constructor(message) {
		super(message);
		this.name = 'Problem';
	}
}

/**
 * Prints a failure for a person: the sentence of a Problem, the stack of anything else.
 * @param {unknown} error
 */
export function report(error) {
	if (error instanceof Problem) process.stderr.write(`\n${error.message}\n`);
	else process.stderr.write(`\n${error instanceof Error ? error.stack : String(error)}\n`);
}
