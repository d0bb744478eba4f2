import { and, eq } from 'drizzle-orm';
import fc from 'fast-check';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { AppError } from '$lib/errors';
import type { Policy } from '$lib/schemas/review';
import type { Actor } from '$lib/server/auth/access';
import * as threads from '$lib/server/comments/threads';
import { db } from '$lib/server/db/client';
import { thread } from '$lib/server/db/schema/notes';
import { candidate, revision, signOff } from '$lib/server/db/schema/review';
import { closePool } from '$lib/server/evaluation/pool';
import * as candidates from '$lib/server/revisions/candidates';
import * as policies from '$lib/server/revisions/policy';
import { verifyAll } from '$lib/server/signed-record/verification';
import { createDatabase, type TestDatabase } from '../support/database';
import { edit, proposal, writeNote } from '../support/note-life';
import { makeCast, testPassword as password, type Cast } from '../support/people';

let database: TestDatabase;
let cast: Cast;
beforeAll(async () => {
	database = await createDatabase();
	cast = await makeCast();
});
afterAll(async () => {
	await closePool();
	await database.drop();
});

const who = fc.constantFrom<keyof Cast>(
	...(['reader', 'author', 'engineer', 'approver', 'second', 'administrator'] as const),
);
const policy: fc.Arbitrary<Policy> = fc.record(
	{
		checkers: fc.constantFrom(1, 1, 1, 2),
		authorsMayCheck: fc.boolean(),
		authorsMayApprove: fc.boolean(),
		checkersMayApprove: fc.boolean(),
		undecidedBlocks: fc.boolean(),
		commentsBlock: fc.boolean(),
		waivers: fc.boolean(),
		identifyAfterMinutes: fc.constant(480),
	},
	{ noNullPrototype: true },
);
type Action =
	| { kind: 'propose' | 'check' | 'approve' | 'return' | 'edit' | 'close'; who: keyof Cast }
	| { kind: 'approveWaived' | 'approveOld' | 'approveBlind'; who: keyof Cast }
	| { kind: 'comment'; who: keyof Cast; blocking: boolean }
	| { kind: 'policy'; who: keyof Cast; policy: Policy };
const deed = <K extends string>(by: fc.Arbitrary<keyof Cast>, ...kinds: K[]) =>
	fc.record({ kind: fc.constantFrom(...kinds), who: by });
// Mostly people who can, so that some lives come to their end.
const checker = fc.constantFrom<keyof Cast>('engineer', 'second', 'author', 'approver');
const approver = fc.constantFrom<keyof Cast>('approver', 'second', 'approver', 'engineer');
const action: fc.Arbitrary<Action> = fc.oneof(
	{ weight: 2, arbitrary: deed(fc.constantFrom<keyof Cast>('author', 'engineer'), 'propose') },
	{ weight: 6, arbitrary: deed(checker, 'check') },
	{ weight: 8, arbitrary: deed(approver, 'approve', 'approveWaived') },
	{ weight: 2, arbitrary: deed(who, 'approveOld', 'approveBlind', 'return', 'edit') },
	{ weight: 2, arbitrary: deed(who, 'close') },
	{
		weight: 1,
		arbitrary: fc.record({ kind: fc.constant('comment'), who, blocking: fc.boolean() }),
	},
	{ weight: 1, arbitrary: fc.record({ kind: fc.constant('policy'), who, policy }) },
);

interface Life {
	id: string;
	number: string;
	seenDigests: string[];
}

/** Does it as the person would on the page; a refusal is fine, anything unexpected is not. Returns whether it was done. */
async function act(life: Life, one: Action): Promise<boolean> {
	const actor = cast[one.who];
	try {
		await doIt(life, one, actor);
		return true;
	} catch (error) {
		if (error instanceof AppError) return false;
		throw error;
	}
}

async function doIt({ id, number, seenDigests }: Life, one: Action, actor: Actor): Promise<void> {
	const newest = async () => (await candidates.get(cast.author, number)).candidate;
	const seen = async () => ({ password, digest: (await newest()).digest });
	switch (one.kind) {
		case 'propose':
			await candidates.propose(actor, number, proposal());
			seenDigests.push((await newest()).digest);
			return;
		case 'check':
			return candidates.check(actor, number, await seen());
		case 'approve':
			return void (await candidates.approve(actor, number, {
				...(await seen()),
				acknowledged: true,
			}));
		case 'approveBlind':
			return void (await candidates.approve(actor, number, await seen()));
		case 'approveOld':
			return void (await candidates.approve(actor, number, {
				password,
				digest: seenDigests[0] ?? '0'.repeat(64),
				acknowledged: true,
			}));
		case 'approveWaived': {
			const { content } = await newest();
			const field = `${content.cells[2]?.id}:1`;
			const waivers = [[field, 'It is protected.']] as const;
			const approval = { ...(await seen()), acknowledged: true, waivers };
			return void (await candidates.approve(actor, number, approval));
		}
		case 'return':
			return candidates.sendBack(actor, number, { ...(await seen()), reason: 'Once more.' });
		case 'edit':
			return edit(actor, id, 1, '\n# more');
		case 'comment': {
			const about = { cellId: 'x', kind: 'question', body: 'Why?' } as const;
			return void (await threads.open(actor, number, { ...about, blocking: one.blocking }));
		}
		case 'close': {
			const open = (await threads.list(actor, number)).find(({ closed }) => !closed);
			if (open) await threads.setClosed(actor, number, open.id, true);
			return;
		}
		case 'policy':
			return policies.set(actor, one.policy);
	}
}

/** Written from the words of the policy, not from the product's rules: why this must not have been frozen. */
async function violations(life: Life, rules: Policy): Promise<string[]> {
	const [last] = await db()
		.select({ candidate, revision })
		.from(revision)
		.innerJoin(candidate, eq(candidate.id, revision.candidateId))
		.where(eq(revision.noteId, life.id))
		.orderBy(revision.frozenAt)
		.then((rows) => rows.slice(-1));
	if (!last) return ['nothing was frozen'];
	const signed = await db()
		.select()
		.from(signOff)
		.where(eq(signOff.candidateId, last.candidate.id));
	const by = (meaning: string) =>
		signed.filter((one) => one.meaning === meaning).map((one) => one.personId);
	const open = await db()
		.select()
		.from(thread)
		.where(and(eq(thread.noteId, life.id)));
	const authors = new Set([...last.candidate.authors.map(({ id }) => id), ...by('prepared')]);
	const [approver = ''] = by('approved');
	const checkers = new Set(by('checked'));
	const waived = new Set(
		signed
			.flatMap(({ details }) => details.waivers ?? [])
			.map(({ cell, line }) => `${cell}:${line}`),
	);
	const blocking = last.candidate.results.requirements.filter(
		({ verdict }) => verdict === 'not met' || (verdict === 'undecided' && rules.undecidedBlocks),
	);
	const wrong: [boolean, string][] = [
		[by('prepared').length !== 1, 'not prepared by one person'],
		[by('approved').length !== 1, 'not approved by one person'],
		[by('returned').length > 0, 'it was returned'],
		[checkers.size < rules.checkers, 'too few checkers'],
		[!rules.authorsMayCheck && [...checkers].some((id) => authors.has(id)), 'an author checked'],
		[!rules.authorsMayApprove && authors.has(approver), 'an author approved'],
		[!rules.checkersMayApprove && checkers.has(approver), 'a checker approved'],
		[
			![cast.approver.personId, cast.second.personId].includes(approver),
			'approved by somebody who is no approver',
		],
		[
			open.some((one) => !one.closedAt && (one.blocking || rules.commentsBlock)),
			'a comment that blocks is open',
		],
		[!rules.waivers && waived.size > 0, 'waived although nobody may'],
		[
			blocking.some(({ cell, line }) => !waived.has(`${cell}:${line}`)),
			'a requirement is not fulfilled and not waived',
		],
		[
			(last.candidate.details?.cautions.length ?? 0) > 0 &&
				!signed.some(({ meaning, details }) => meaning === 'approved' && details.cautions?.length),
			'the caution was not acknowledged',
		],
	];
	return wrong.filter(([is]) => is).map(([, why]) => why);
}

/** Lives that are tried; STATE_MACHINE_RUNS=200 tries as many. */
const runs = Number(process.env.STATE_MACHINE_RUNS ?? 6);
test(
	`no path of random people and actions reaches frozen without what the policy asks (${runs} lives)`,
	async () => {
		let frozen = 0;
		let refused = 0;
		await fc.assert(
			fc.asyncProperty(
				fc.constantFrom(true, true, false),
				policy,
				fc.array(action, { minLength: 12, maxLength: 20 }),
				async (met, first, actions) => {
					await policies.set(cast.administrator, first);
					let rules = first;
					const made = await writeNote(cast.author, 'Life', [
						{ kind: 'text', source: 'Text.' },
						{ kind: 'calculation', source: 'V_bus = 80 V' },
						{ kind: 'requirement', source: met ? 'V_bus <= 90 V' : 'V_bus <= 70 V' },
					]);
					const life: Life = { ...made, seenDigests: [] };
					await act(life, { kind: 'propose', who: 'author' });
					for (const one of actions) {
						const done = await act(life, one);
						if (!done) refused += 1;
						if (done && one.kind === 'policy') rules = one.policy;
						if (!done || !one.kind.startsWith('approve')) continue;
						frozen += 1;
						expect(await violations(life, rules)).toEqual([]);
					}
				},
			),
			{ numRuns: runs, seed: Number(process.env.SEED ?? 20261201), endOnFailure: true },
		);
		// A run in which nothing was frozen or refused would have shown nothing.
		expect(frozen).toBeGreaterThan(0);
		expect(refused).toBeGreaterThan(frozen);
		expect((await verifyAll({ trustedKeys: [], checkpoints: [] })).faults).toEqual([]);
	},
	60_000 + runs * 15_000,
);
