import betainc from '@stdlib/math-base-special-betainc';
import erfc from '@stdlib/math-base-special-erfc';
import { isRefusal, type Refusal } from '../tables/refusal';
import { fitPolynomial, type Fit, type FitOptions } from './fit';
import type { Readings } from './readings';

export interface Degree {
	degree: number;
	fit: Fit;
	/** Of the highest power against the curve without it; null for the lowest degree and for a perfect fit. */
	fStatistic: number | null;
	/** Probability of at least that F if the highest power were nothing but scatter. */
	pValue: number | null;
	/**
	 * Root mean square of what each reading misses the curve through all the others by, in the unit of y; null where
	 * a reading alone decides the curve.
	 */
	leaveOneOut: number | null;
}

export interface Comparison {
	degrees: Degree[];
	/** The degree with the least leave-one-out error. */
	leastLeaveOneOut: number | null;
	/** The highest degree whose highest power is beyond scatter at the 5 % level. */
	lastSignificant: number | null;
}

/**
 * Fits every degree up to `highest`, as far as the readings determine them. With stated uncertainties F compares
 * with them (a chi-square of one degree of freedom), otherwise with the residuals.
 */
export function compareDegrees(
	readings: Readings,
	options: Omit<FitOptions, 'degree'> & { highest: number },
): Comparison | Refusal {
	const lowest = options.intercept === false ? 1 : 0;
	const degrees: Degree[] = [];
	for (let degree = lowest; degree <= Math.max(lowest, options.highest); degree++) {
		const fit = fitPolynomial(readings, { ...options, degree });
		if (isRefusal(fit)) {
			if (degrees.length === 0) return fit;
			break;
		}
		const leaveOneOut = leaveOneOutOf(fit, readings.uncertainties);
		degrees.push({ degree, fit, ...tested(degrees.at(-1)?.fit, fit), leaveOneOut });
	}
	const judged = degrees.filter(({ leaveOneOut }) => leaveOneOut !== null);
	judged.sort((a, b) => (a.leaveOneOut ?? 0) - (b.leaveOneOut ?? 0) || a.degree - b.degree);
	const significant = degrees.filter(({ pValue }) => pValue !== null && pValue < 0.05);
	return {
		degrees,
		leastLeaveOneOut: judged[0]?.degree ?? null,
		lastSignificant: significant.at(-1)?.degree ?? null,
	};
}

function tested(before: Fit | undefined, fit: Fit): Pick<Degree, 'fStatistic' | 'pValue'> {
	if (!before) return { fStatistic: null, pValue: null };
	if (fit.spread === 'stated') {
		const fStatistic = Math.max(0, (before.chiSquare ?? 0) - (fit.chiSquare ?? 0));
		return { fStatistic, pValue: erfc(Math.sqrt(fStatistic / 2)) };
	}
	if (!(fit.residualSquares > 0)) return { fStatistic: null, pValue: null };
	const freedom = fit.degreesOfFreedom;
	const gain = Math.max(0, before.residualSquares - fit.residualSquares);
	const fStatistic = (gain / fit.residualSquares) * freedom;
	return { fStatistic, pValue: beyond(fStatistic, freedom) };
}

/** Upper tail of F with 1 and `freedom` degrees of freedom (Abramowitz and Stegun, 26.6.2). */
function beyond(fStatistic: number, freedom: number): number {
	return betainc(freedom / (freedom + fStatistic), freedom / 2, 0.5, true, false);
}

/** Allen's sum (Technometrics 16, 1974, pages 125 to 127): residual ÷ (1 − leverage), no refit needed. */
function leaveOneOutOf(fit: Fit, uncertainties: readonly number[] | undefined): number | null {
	let squares = 0;
	let weights = 0;
	for (const [i, residual] of fit.residuals.entries()) {
		const left = 1 - (fit.leverages[i] ?? 1);
		if (left < 1e-10) return null;
		const weight = 1 / (uncertainties?.[i] ?? 1) ** 2;
		squares += weight * (residual / left) ** 2;
		weights += weight;
	}
	return Math.sqrt(squares / weights);
}
