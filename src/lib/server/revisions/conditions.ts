import type { Blocker, Condition } from '$lib/schemas/review';
import { openCandidate, type Standing } from './standing';

/** What the team's policy asks of the open candidate, a sentence each, and whether it is fulfilled. */
export function of(standing: Standing, blockers: readonly Blocker[]): Condition[] {
	const candidate = openCandidate(standing);
	if (!candidate) return [];
	return [
		...blockers.map((blocker) => ({ ...blocker, fulfilled: false })),
		...settled(standing, blockers),
		...signatures(standing),
	];
}

function settled({ candidate, policy }: Standing, blockers: readonly Blocker[]): Condition[] {
	const { requirements, errors } = candidate!.results;
	const good = (text: string) => ({ text, fulfilled: true });
	const count = requirements.length;
	const sound: Condition[] = [];
	if (count > 0 && requirements.every(({ verdict }) => verdict === 'met')) {
		sound.push(
			good(count === 1 ? 'The one requirement is met.' : `All ${count} requirements are met.`),
		);
	}
	if (errors.length === 0) sound.push(good('No line has an error.'));
	if (!blockers.some(({ text }) => /^An open /.test(text))) {
		sound.push(good(policy.commentsBlock ? 'No comment is open.' : 'No blocking comment is open.'));
	}
	return sound;
}

function signatures({ candidate, policy, signOffs }: Standing): Condition[] {
	const checks = signOffs.filter(({ meaning }) => meaning === 'checked');
	const conditions: Condition[] = [
		{
			text:
				policy.checkers === 1
					? `Checked by one person${policy.authorsMayCheck ? '' : ', who is not among its authors'}.`
					: `Checked by ${policy.checkers} people${policy.authorsMayCheck ? '' : ', none among its authors'}; ${checks.length} did.`,
			fulfilled: checks.length >= policy.checkers,
		},
	];
	if ((candidate!.details?.cautions.length ?? 0) > 0) {
		conditions.push({ text: 'The approver acknowledges the caution.', fulfilled: false });
	}
	const others = [
		...(policy.authorsMayApprove ? [] : ['prepared', 'wrote']),
		...(policy.checkersMayApprove ? [] : ['checked']),
	];
	const who = others.length > 0 ? ` by somebody who neither ${others.join(' nor ')} it` : '';
	conditions.push({ text: `Approved${who}.`, fulfilled: false });
	return conditions;
}
