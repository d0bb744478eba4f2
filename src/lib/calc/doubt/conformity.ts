import { tProbability } from './student';

/** One limit: how far the value is inside it, in doubt by u and U. Negative beyond the limit. */
export interface Side {
	margin: number;
	standardUncertainty: number;
	expandedUncertainty: number;
	dof: number;
	/** `<` rather than `<=`: the limit itself is outside. */
	strict?: boolean;
}

export interface Conformity {
	verdict: 'met' | 'not met' | 'undecided';
	/** Least margin of all limits. */
	margin: number;
	/** Probability that all limits are kept. */
	probability: number;
}

/**
 * Decides a requirement of one limit or two (JCGM 106:2012). Simple acceptance (8.2) goes by the value alone. Guarded
 * acceptance (8.3.2) with guard band w = U is met where the value is inside each limit by U at least, not met where it is
 * beyond one by more than U, and undecided between. The probability (7.3, 7.4) is that of the normal distribution, of
 * the t distribution where degrees of freedom are finite.
 */
export function decide(sides: readonly Side[], rule: 'simple' | 'guarded'): Conformity {
	let verdict: Conformity['verdict'] = 'met';
	// Two limits of one value exclude each other, so that the parts outside add up.
	let outside = 0;
	for (const side of sides) {
		const guard = rule === 'guarded' ? side.expandedUncertainty : 0;
		outside += 1 - probabilityInside(side);
		if (isInside(side, guard)) continue;
		if (!isInside(side, -guard)) verdict = 'not met';
		else if (verdict === 'met') verdict = 'undecided';
	}
	return {
		verdict,
		margin: Math.min(...sides.map((side) => side.margin)),
		probability: Math.min(1, Math.max(0, 1 - outside)),
	};
}

function isInside({ margin, strict }: Side, guard: number): boolean {
	return strict ? margin > guard : margin >= guard;
}

function probabilityInside(side: Side): number {
	if (side.standardUncertainty > 0)
		return tProbability(side.margin / side.standardUncertainty, side.dof);
	return isInside(side, 0) ? 1 : 0;
}
