import { day } from '$lib/components/time';
import type { Said } from '$lib/schemas/mail';

/** What a mail says, before it is text or HTML. */
export interface Wording {
	subject: string;
	/** Paragraphs. */
	lines: string[];
	link: { label: string; path: string };
}

/** The words of one thing that is told. */
export function wordingOf(said: Said): Wording {
	const { number, title, letter, by, words, due } = said;
	const note = `${number}, ${title}`;
	const dueLine = due ? [`An answer is wanted by ${day(due)}.`] : [];
	const candidate = { label: `Open candidate ${letter}`, path: said.path };
	switch (said.what) {
		case 'check':
			return {
				subject: `${number}: candidate ${letter} waits for your check`,
				lines: [`${by} asks you to check candidate ${letter} of ${note}.`, words, ...dueLine],
				link: candidate,
			};
		case 'approve':
			return {
				subject: `${number}: candidate ${letter} waits for your approval`,
				lines: [
					`Candidate ${letter} of ${note} is checked and waits for your approval.`,
					words,
					...dueLine,
				],
				link: candidate,
			};
		case 'returned':
			return {
				subject: `${number}: candidate ${letter} was returned`,
				lines: [`${by} returned candidate ${letter} of ${note}:`, words],
				link: candidate,
			};
		case 'frozen':
			return {
				subject: `${number}: revision ${letter} is frozen`,
				lines: [`${by} approved ${note}. It is frozen as revision ${letter}.`],
				link: { label: `Open revision ${letter}`, path: said.path },
			};
		case 'withdrawn':
			return {
				subject: `${number}: revision ${letter} was withdrawn`,
				lines: [`${by} withdrew revision ${letter} of ${note}. It is no longer valid:`, words],
				link: { label: `Open revision ${letter}`, path: said.path },
			};
		case 'mentioned':
			return {
				subject: `${number}: ${by} mentions you`,
				lines: [`${by} mentions you in a comment on ${note}:`, words],
				link: { label: 'Open the comment', path: said.path },
			};
		case 'due':
			return {
				subject: `${number}: candidate ${letter} still waits for you`,
				lines: [`Candidate ${letter} of ${note} still waits for your answer.`, words, ...dueLine],
				link: candidate,
			};
	}
}
