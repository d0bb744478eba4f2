import { may } from '$lib/schemas/role';
import type { ReviewStatus } from '$lib/schemas/review';
import type { Actor } from '../auth/access';
import { openCandidate, type Standing } from './standing';

type Answer = true | string;

const nothingOpen = 'No candidate is open. Propose one first.';

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
	const candidate = openCandidate(standing);
	if (!candidate) return nothingOpen;
	if (!may(actor.role, 'check')) return `Your role (${actor.role}) does not check notes.`;
	if (standing.candidateState === 'checked') return 'It is checked already.';
	if (signed(actor, standing, 'prepared')) return 'You prepared it. Somebody else checks it.';
	if (wrote(actor, standing)) return 'You are among its authors. Somebody else checks it.';
	return true;
}

/** Whether the actor may approve the open candidate, blockers aside. */
export function approve(actor: Actor, standing: Standing): Answer {
	const candidate = openCandidate(standing);
	if (!candidate) return nothingOpen;
	if (!may(actor.role, 'approve')) return `Your role (${actor.role}) does not approve notes.`;
	if (signed(actor, standing, 'prepared')) return 'You prepared it. Somebody else approves it.';
	if (wrote(actor, standing)) return 'You are among its authors. Somebody else approves it.';
	if (standing.candidateState !== 'checked') return 'It must be checked first.';
	if (signed(actor, standing, 'checked')) return 'You checked it. Somebody else approves it.';
	return true;
}

/** Whether the actor may send the open candidate back. Its authors may: they take it back. */
export function sendBack(actor: Actor, standing: Standing): Answer {
	if (!openCandidate(standing)) return nothingOpen;
	if (!may(actor.role, 'check')) return `Your role (${actor.role}) does not return notes.`;
	return true;
}

/** All four answers for the page. */
export function answers(actor: Actor, standing: Standing, blocked: boolean): ReviewStatus['can'] {
	const approval = approve(actor, standing);
	return {
		propose: propose(actor, standing),
		check: check(actor, standing),
		approve: approval === true && blocked ? 'What blocks it must be settled first.' : approval,
		return: sendBack(actor, standing),
	};
}

function wrote(actor: Actor, standing: Standing): boolean {
	return standing.candidate?.authors.some((author) => author.id === actor.personId) ?? false;
}

function signed(actor: Actor, standing: Standing, meaning: 'prepared' | 'checked'): boolean {
	return standing.signOffs.some(
		(one) => one.meaning === meaning && one.personId === actor.personId,
	);
}
