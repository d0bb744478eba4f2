import { polynomial } from '../tables/polynomial';
import { refuseNotFinite, refuseNotPositive, type Refusal } from '../tables/refusal';
import type { Fit } from './fit';
import { scaled } from './scaling';

export interface Prediction {
	value: number;
	/** Slope of the curve. */
	derivative: number;
	/** Of the curve itself at x. */
	standardUncertainty: number;
	/** Of a new reading at x; null on a weighted fit where its own uncertainty was not given. */
	readingUncertainty: number | null;
	/**
	 * Parts of `standardUncertainty` from independent sources, the same for every x: the covariance of two
	 * predictions is the sum of their parts' products.
	 */
	parts: number[];
	/** Whether x lies within the readings' range. */
	inside: boolean;
}

/** Value of a fitted curve with its uncertainty. `ownUncertainty` is that of a single new reading. */
export function predict(fit: Fit, x: number, ownUncertainty?: number): Prediction | Refusal {
	const fault =
		refuseNotFinite({ x }) ??
		(ownUncertainty === undefined ? undefined : refuseNotPositive({ ownUncertainty }));
	if (fault) return fault;
	const u = scaled(fit.scaled, x);
	const { value, derivative } = polynomial(u, fit.scaled.coefficients);
	const parts = partsAt(fit, u);
	const standardUncertainty = Math.hypot(...parts);
	const own = ownUncertainty ?? (fit.weighted ? null : fit.residualStandardDeviation);
	return {
		value,
		derivative: derivative / fit.scaled.halfRange,
		standardUncertainty,
		readingUncertainty: own === null ? null : Math.hypot(standardUncertainty, own),
		parts,
		inside: x >= fit.range.lower && x <= fit.range.upper,
	};
}

function partsAt({ scaled: { factor } }: Fit, u: number): number[] {
	const size = factor[0]?.length ?? 0;
	return Array.from({ length: size }, (_, j) => {
		let part = 0;
		for (let k = factor.length - 1; k >= 0; k--) part = part * u + factor[k]![j]!;
		return part;
	});
}
