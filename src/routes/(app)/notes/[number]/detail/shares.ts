interface Bar {
	/** Percentages of the width. */
	from: number;
	width: number;
}

/** Bars of shares on one scale that has room for the whole and for shares below zero; `zero` is where they start. */
export function barsOf(shares: readonly number[]): { zero: number; bars: Bar[] } {
	const least = Math.min(0, ...shares);
	const span = Math.max(1, ...shares) - least;
	const at = (share: number) => (100 * (share - least)) / span;
	return {
		zero: at(0),
		bars: shares.map((share) => {
			const from = at(Math.min(0, share));
			return { from, width: at(Math.max(0, share)) - from };
		}),
	};
}
