interface Counts {
	met: number;
	undecided: number;
	notMet: number;
}

interface Mark {
	verdict: keyof Counts;
	/** Set where one mark stands for several requirements. */
	count?: number;
}

/** Most marks that are drawn one per requirement. */
const mostSingle = 16;

const order = ['met', 'undecided', 'notMet'] as const;

/** One mark per requirement, best first; beyond sixteen one mark per verdict with its count. */
export function tallyMarks(counts: Counts): Mark[] {
	const total = counts.met + counts.undecided + counts.notMet;
	if (total > mostSingle) {
		return order
			.filter((verdict) => counts[verdict] > 0)
			.map((verdict) => ({ verdict, count: counts[verdict] }));
	}
	return order.flatMap((verdict) => Array.from({ length: counts[verdict] }, () => ({ verdict })));
}

/** The counts as a label: "3 met, 1 undecided, 0 not met". */
export function tallyName({ met, undecided, notMet }: Counts): string {
	return `${met} met, ${undecided} undecided, ${notMet} not met`;
}
