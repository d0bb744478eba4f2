import { expect, test } from 'vitest';
import type { Evaluation, Requirement, Verdict } from '$lib/calc/results';
import type { Thread } from '$lib/schemas/comments';
import { obstaclesOf } from './obstacles';

const cells = ['a', 'b'].map((id) => ({ id, kind: 'calculation' as const, source: '' }));
const saved = { state: 'saved' as const, count: 0, kept: 0 };
const evaluation = (part: Partial<Evaluation>): Evaluation => ({
	engine: '0',
	quantities: {},
	lines: [],
	requirements: [],
	figures: [],
	errors: [],
	...part,
});
const requirement = (verdict: Verdict) => ({ cell: 'b', line: 2, verdict }) as Requirement;
const thread = (part: Partial<Thread>): Thread => ({
	id: 't',
	cellId: 'a',
	kind: 'correction',
	blocking: true,
	closed: null,
	comments: [],
	...part,
});

test('a line with an error stops proposing and is named once', () => {
	const fault = {
		cell: 'b',
		line: 1,
		from: 0,
		to: 1,
		code: 'syntax' as const,
		message: 'Closing bracket is missing.',
	};
	expect(obstaclesOf(cells, evaluation({ errors: [fault, fault] }), [], saved)).toEqual([
		{ text: 'Cell 2, line 1: Closing bracket is missing.', cellId: 'b', stops: true },
	]);
});

test('a requirement that is not met and an open blocking thread stop freezing only', () => {
	const requirements = (['met', 'not met', 'undecided'] as const).map(requirement);
	const threads = [
		thread({}),
		thread({ blocking: false }),
		thread({ closed: { at: '2026-10-14T10:42:31Z', by: 'A' } }),
	];
	expect(obstaclesOf(cells, evaluation({ requirements }), threads, saved)).toEqual([
		{ text: 'Cell 2, line 2: the requirement is not met.', cellId: 'b', stops: false },
		{ text: 'Cell 2, line 2: the requirement is undecided.', cellId: 'b', stops: false },
		{ text: 'Cell 1: a blocking correction is open.', cellId: 'a', stops: false },
	]);
});

test('edits on their way stop proposing, a clean saved sheet has no obstacle', () => {
	expect(
		obstaclesOf(cells, evaluation({}), [], { state: 'saving', count: 2, kept: 2 }),
	).toHaveLength(1);
	expect(obstaclesOf(cells, evaluation({}), [], saved)).toEqual([]);
});
