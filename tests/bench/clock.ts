import { quantile } from './row';

/** Median time of some work in ms, once it is warm. */
export function medianMs(work: () => void, rounds = 60): number {
	for (let warm = 0; warm < Math.min(20, rounds); warm++) work();
	const sample = Array.from({ length: rounds }, () => {
		const from = performance.now();
		work();
		return performance.now() - from;
	});
	return quantile(sample, 0.5);
}

/** Throws unless two ways of computing a figure agree. */
export function agree(ours: number | null | undefined, theirs: number, within = 1e-9): void {
	if (typeof ours !== 'number' || !(Math.abs(ours / theirs - 1) < within))
		throw new Error(`two evaluations disagree: ${String(ours)} and ${theirs}`);
}
