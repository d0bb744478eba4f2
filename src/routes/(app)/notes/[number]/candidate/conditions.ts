import type { Evaluation } from '$lib/calc/results';
import type { Thread } from '$lib/schemas/comments';

/** What freezing asks for and the candidate fulfils, a sentence each. What blocks is said by the review itself. */
export function fulfilled(results: Evaluation, threads: Thread[]): string[] {
	const sentences: string[] = [];
	const count = results.requirements.length;
	if (count > 0 && results.requirements.every(({ verdict }) => verdict === 'met')) {
		sentences.push(
			count === 1 ? 'The one requirement is met.' : `All ${count} requirements are met.`,
		);
	}
	if (results.errors.length === 0) sentences.push('No line has an error.');
	if (!threads.some((thread) => thread.blocking && !thread.closed)) {
		sentences.push('No blocking comment is open.');
	}
	return sentences;
}
