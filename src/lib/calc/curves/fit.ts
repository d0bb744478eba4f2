import { refuse, type Refusal } from '../tables/refusal';
import { at, column, dot, put, type Column } from './columns';
import { narrow, over, plus, squareRoot, times, wide, zero, type Wide } from './double-double';
import { solve, sumOfProducts, type Solution } from './least-squares';
import { refuseDegree, refuseRank, refuseReadings, type Readings } from './readings';
import * as scaling from './scaling';

export interface FitOptions {
	/** 1 for a straight line; 0 to 12. */
	degree: number;
	/** false for a curve through the origin. */
	intercept?: boolean;
	/**
	 * Where the scatter comes from when uncertainties are given: from them (`stated`, the default), or from the
	 * residuals, the uncertainties being weights only (`observed`). Without uncertainties always `observed`.
	 */
	spread?: 'stated' | 'observed';
}

/** A fitted polynomial. Lists are in order of rising power, from the power 0 even where it is not fitted. */
export interface Fit {
	degree: number;
	intercept: boolean;
	spread: 'stated' | 'observed';
	weighted: boolean;
	points: number;
	/** Of powers of x. Predict from `scaled`: these lose digits where x is far from zero. */
	coefficients: number[];
	standardUncertainties: number[];
	covariance: number[][];
	/** The same curve in powers of u = (x − centre) / halfRange. */
	scaled: scaling.Scaling & {
		coefficients: number[];
		/** Rows by power; a row's parts belong to independent sources of standard uncertainty 1. */
		factor: number[][];
	};
	/** y − fitted, in the unit of y. */
	residuals: number[];
	/** Weight of each reading in its own fitted value, 0 to 1. */
	leverages: number[];
	/** √(Σ residual² / degreesOfFreedom) in the unit of y; null without degrees of freedom. */
	residualStandardDeviation: number | null;
	/** Σ (residual / uncertainty)²; null without uncertainties. */
	chiSquare: number | null;
	/** Σ residual² in the unit of y squared, each times its weight (least uncertainty / uncertainty)². */
	residualSquares: number;
	/** Share of y's scatter that the curve explains, about zero where there is no intercept; null for constant y. */
	rSquared: number | null;
	/** F statistic of the whole curve; null where there is nothing to divide by. */
	fStatistic: number | null;
	/** Points less fitted coefficients. */
	degreesOfFreedom: number;
	/** Of the uncertainties: infinite where they come from stated ones. */
	uncertaintyDegreesOfFreedom: number;
	/** Smallest and largest x of the readings. */
	range: { lower: number; upper: number };
}

/** Weighted or unweighted least-squares polynomial through readings. */
export function fitPolynomial(readings: Readings, options: FitOptions): Fit | Refusal {
	const { x, y, uncertainties } = readings;
	const { degree, intercept = true } = options;
	const spread = uncertainties ? (options.spread ?? 'stated') : 'observed';
	const fault = refuseReadings(readings) ?? refuseDegree(readings, { degree, intercept }, spread);
	if (fault) return fault;
	const scale = scaling.scalingOf(x, intercept);
	const weighing = uncertainties && scaling.weightsOf(uncertainties);
	const unit = scaling.powerOfTwo(y);
	const powers = { from: intercept ? 0 : 1, degree };
	const design = scaling.powersOf(x, scale, powers, weighing?.weights);
	const solution = solve(design, scaling.scaledReadings(y, unit, weighing?.weights));
	if ('dependent' in solution) return refuseRank(degree);

	const freedom = x.length - design.length;
	const spreadPerUnit =
		spread === 'stated' && weighing
			? wide(weighing.least / unit)
			: perFreedom(solution.residualSquares, freedom);
	const curve = coefficientsOf(solution, { scale, powers, unit, spread: spreadPerUnit });
	const residuals = unweighted(solution.residuals, weighing?.weights);
	const squares = narrow(solution.residualSquares);
	const fit: Fit = {
		degree,
		intercept,
		spread,
		weighted: weighing !== undefined,
		points: x.length,
		...curve,
		residuals: Array.from(residuals.hi, (value) => value * unit),
		leverages: leveragesOf(design, solution.inverse),
		residualStandardDeviation:
			freedom > 0 ? narrow(perFreedom(dot(residuals, residuals), freedom)) * unit : null,
		chiSquare: weighing ? squares * (unit / weighing.least) ** 2 : null,
		residualSquares: squares * unit ** 2,
		...qualityOf(solution, { intercept, freedom, constant: new Set(y).size === 1 }),
		degreesOfFreedom: freedom,
		uncertaintyDegreesOfFreedom: spread === 'stated' ? Infinity : freedom,
		range: scaling.rangeOf(x),
	};
	return isFinite(fit) ? fit : refuseOverflow();
}

function perFreedom(squares: Wide, freedom: number): Wide {
	return squareRoot(over(squares, wide(freedom)));
}

interface Frame {
	scale: scaling.Scaling;
	powers: { from: number; degree: number };
	/** What y was divided by. */
	unit: number;
	/** Standard uncertainty of the most certain reading, divided by `unit`. */
	spread: Wide;
}

function coefficientsOf(solution: Solution, { scale, powers, unit, spread }: Frame) {
	const padding = new Array<Wide>(solution.inverse.length).fill(zero);
	const inverse = powers.from === 0 ? solution.inverse : [padding, ...solution.inverse];
	const inScale = powers.from === 0 ? solution.coefficients : [zero, ...solution.coefficients];
	const turn = scaling.toOriginal(scale, powers.degree);
	const factorOf = (rows: Wide[][]) =>
		rows.map((row) => row.map((value) => narrow(times(value, spread)) * unit));
	const columns = padding.map((_, j) => inverse.map((row) => row[j] ?? zero));
	const factor = factorOf(turn.map((row) => columns.map((col) => sumOfProducts(row, col))));
	return {
		coefficients: turn.map((row) => narrow(sumOfProducts(row, inScale)) * unit),
		standardUncertainties: factor.map((row) => Math.hypot(...row)),
		covariance: factor.map((a) =>
			factor.map((b) => a.reduce((sum, value, j) => sum + value * (b[j] ?? 0), 0)),
		),
		scaled: {
			...scale,
			coefficients: inScale.map((value) => narrow(value) * unit),
			factor: factorOf(inverse),
		},
	};
}

function unweighted(residuals: Column, weights: Column | undefined): Column {
	if (!weights) return residuals;
	const plain = column(residuals.hi.length);
	for (let i = 0; i < plain.hi.length; i++) put(plain, i, over(at(residuals, i), at(weights, i)));
	return plain;
}

function leveragesOf(design: readonly Column[], inverse: readonly (readonly Wide[])[]): number[] {
	const rows = inverse.map((row) => row.map(narrow));
	return Array.from(design[0]?.hi ?? [], (_, i) => {
		let leverage = 0;
		for (let j = 0; j < rows.length; j++) {
			let part = 0;
			for (let k = 0; k <= j; k++) part += (design[k]?.hi[i] ?? 0) * (rows[k]?.[j] ?? 0);
			leverage += part * part;
		}
		return Math.min(1, leverage);
	});
}

function qualityOf(
	{ projections, residualSquares }: Solution,
	about: { intercept: boolean; freedom: number; constant: boolean },
) {
	const tested = projections.slice(about.intercept ? 1 : 0);
	const explained = sumOfProducts(tested, tested);
	const all = plus(explained, residualSquares);
	const divisible = tested.length > 0 && about.freedom > 0 && residualSquares.hi > 0;
	return {
		rSquared:
			all.hi === 0 || (about.intercept && about.constant) ? null : narrow(over(explained, all)),
		fStatistic: divisible
			? narrow(
					over(over(explained, wide(tested.length)), over(residualSquares, wide(about.freedom))),
				)
			: null,
	};
}

function isFinite(fit: Fit): boolean {
	return [...fit.coefficients, ...fit.standardUncertainties, fit.residualSquares].every(
		Number.isFinite,
	);
}

function refuseOverflow(): Refusal {
	return refuse('overflow', 'The coefficients are too large for this unit of x or y', {
		mend: 'Use a larger or smaller unit, so that the readings are nearer to 1.',
	});
}
