import { may } from '$lib/schemas/role';
import type { Blocker, ReviewStatus } from '$lib/schemas/review';
import type { Actor } from '../auth/access';
import { openCandidate, type Standing } from './standing';

type Answer = true | string;

/** Whether the actor may propose the working copy now, or why not. */
export function propose(actor: Actor, standing: Standing): Answer {
	if (!may(actor.role, 'write')) return `Your role (${actor.role}) does not prepare notes.`;
	if (openCandidate(standing)) {
		return `Candidate ${standing.nextLetter} is ${standing.candidateState}. Only one is open at a time.`;
	}
	if (standing.state === 'frozen') {
		return `Nothing changed since revision ${standing.revisions[0]?.letter}.`;
	}
	return true;
}

/** Whether the actor may sign the open candidate as checked. */
export function check(actor: Actor, standing: Standing): Answer {
	const { policy, candidateState } = standing;
	if (!openCandidate(standing)) return nothingOpen(standing);
	if (!may(actor.role, 'check')) return `Your role (${actor.role}) does not check notes.`;
	if (candidateState === 'checked') return 'It is checked already.';
	if (signed(actor, standing, 'checked'))
		return 'You checked it already. Somebody else checks too.';
	if (policy.authorsMayCheck) return true;
	if (signed(actor, standing, 'prepared')) return 'You prepared it. Somebody else checks it.';
	if (wrote(actor, standing)) return 'You are among its authors. Somebody else checks it.';
	return true;
}

/** Whether the actor may approve the open candidate, blockers aside. */
export function approve(actor: Actor, standing: Standing): Answer {
	const { policy, candidateState } = standing;
	if (!openCandidate(standing)) return nothingOpen(standing);
	if (!may(actor.role, 'approve')) return `Your role (${actor.role}) does not approve notes.`;
	if (!policy.authorsMayApprove) {
		if (signed(actor, standing, 'prepared')) return 'You prepared it. Somebody else approves it.';
		if (wrote(actor, standing)) return 'You are among its authors. Somebody else approves it.';
	}
	if (candidateState !== 'checked') return checksMissing(standing);
	if (!policy.checkersMayApprove && signed(actor, standing, 'checked')) {
		return 'You checked it. Somebody else approves it.';
	}
	return true;
}

/** Whether the actor may send the open candidate back. Its authors may: they take it back. */
export function sendBack(actor: Actor, standing: Standing): Answer {
	if (!openCandidate(standing)) return nothingOpen(standing);
	if (!may(actor.role, 'check')) return `Your role (${actor.role}) does not return notes.`;
	return true;
}

/** All four answers for the page. What the approver may waive stops nobody. */
export function answers(
	actor: Actor,
	standing: Standing,
	blockers: readonly Blocker[],
): ReviewStatus['can'] {
	const approval = approve(actor, standing);
	const blocked = blockers.some((blocker) => !blocker.waivable);
	return {
		propose: propose(actor, standing),
		check: check(actor, standing),
		approve: approval === true && blocked ? 'What blocks it must be settled first.' : approval,
		return: sendBack(actor, standing),
	};
}

function nothingOpen({ candidate, candidateState, signOffs }: Standing): string {
	if (!candidate) return 'No candidate is open. Propose one first.';
	const closing = signOffs.find(({ meaning }) => meaning === candidateState);
	const end = closing ? ` by ${closing.name}` : '';
	return candidateState === 'returned'
		? `Candidate ${candidate.ordinal} was returned${end}. It is mended and proposed again.`
		: `Candidate ${candidate.ordinal} was approved${end} and is frozen. Nothing more is signed on it.`;
}

function checksMissing({ policy, signOffs }: Standing): string {
	const done = signOffs.filter(({ meaning }) => meaning === 'checked').length;
	return policy.checkers === 1
		? 'It must be checked first.'
		: `It must be checked by ${policy.checkers} people first; ${done} did.`;
}

function wrote(actor: Actor, standing: Standing): boolean {
	return standing.candidate?.authors.some((author) => author.id === actor.personId) ?? false;
}

function signed(actor: Actor, standing: Standing, meaning: 'prepared' | 'checked'): boolean {
	return standing.signOffs.some(
		(one) => one.meaning === meaning && one.personId === actor.personId,
	);
}
