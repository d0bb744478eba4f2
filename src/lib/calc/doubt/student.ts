import erfc from '@stdlib/math-base-special-erfc';
import erfcinv from '@stdlib/math-base-special-erfcinv';
import studentCdf from '@stdlib/stats-base-dists-t-cdf';
import studentQuantile from '@stdlib/stats-base-dists-t-quantile';

/** Degrees of freedom from which the t distribution differs from the normal one by less than 1e-8 of k. */
const many = 1e8;

/** Probability below z of the standard normal distribution. */
export function normalProbability(z: number): number {
	return 0.5 * erfc(-z / Math.SQRT2);
}

/** z below which the standard normal distribution has probability p. */
export function normalQuantile(p: number): number {
	return -Math.SQRT2 * erfcinv(2 * p);
}

/** Probability below t of the t distribution; infinite degrees of freedom are the normal distribution. */
export function tProbability(t: number, dof: number): number {
	return dof >= many ? normalProbability(t) : studentCdf(t, dof);
}

const factors = new Map<string, number>();
/** The last factor of the normal distribution, which most quantities have. */
let normal = { coverage: NaN, factor: NaN };

/** k such that a share `coverage` of the t distribution lies within ±k (JCGM 100:2008, tables G.1 and G.2). */
export function coverageFactor(coverage: number, dof: number): number {
	if (dof >= many) {
		if (normal.coverage !== coverage)
			normal = { coverage, factor: -normalQuantile((1 - coverage) / 2) };
		return normal.factor;
	}
	const key = `${coverage} ${dof}`;
	let factor = factors.get(key);
	if (factor === undefined) {
		const above = (1 - coverage) / 2;
		factor = -studentQuantile(above, dof);
		if (factors.size > 2_000) factors.clear();
		factors.set(key, factor);
	}
	return factor;
}
