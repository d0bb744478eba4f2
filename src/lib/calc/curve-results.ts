import { compareDegrees } from './curves/compare';
import { refuseNotMonotonic } from './curves/invert';
import type { Fitted } from './given-cells';
import type { NumberedCurve } from './memory';
import type { Column, Curve, CurveCell } from './results';
import { isRefusal } from './tables/refusal';
import { divided, power, product, type Unit } from './units/unit';

/** Highest degree that a comparison tries. */
const highest = 5;

/** What is shown of the curves of a note; with `columns` other degrees are compared. */
export function curveResults(
	curves: ReadonlyMap<CurveCell, NumberedCurve>,
	columns?: (cell: CurveCell) => { x: Column; y: Column } | undefined,
): Record<string, Curve> {
	const all: Record<string, Curve> = {};
	for (const [cell, { fitted }] of curves) {
		const given = columns?.(cell);
		const comparison = given && compared(cell, given);
		all[cell.name] = { ...curveOf(cell, fitted), ...(comparison && { comparison }) };
	}
	return all;
}

function curveOf(cell: CurveCell, { fit, x, y }: Fitted): Curve {
	const { residualStandardDeviation, rSquared, degreesOfFreedom, residuals, range } = fit;
	return {
		cell: cell.id,
		degree: fit.degree,
		weighted: fit.weighted,
		points: fit.points,
		xUnit: x.unit.text,
		yUnit: y.unit.text,
		coefficients: fit.coefficients.map((value, k) => ({
			value,
			standardUncertainty: fit.standardUncertainties[k] ?? 0,
			unit: coefficientUnit(y.unit, x.unit, k).text,
		})),
		covariance: fit.covariance,
		residualStandardDeviation,
		rSquared,
		degreesOfFreedom,
		residuals,
		range,
		monotonic: refuseNotMonotonic(fit) === undefined,
	};
}

function coefficientUnit(y: Unit, x: Unit, exponent: number): Unit {
	if (exponent === 0) return y;
	// A scale with a zero of its own counts in its steps here, which have no zero.
	const step = (unit: Unit) => product(unit.parts);
	return divided(step(y), power(step(x), exponent));
}

function compared(cell: CurveCell, { x, y }: { x: Column; y: Column }): Curve['comparison'] {
	const uncertainties = cell.weighted ? y.uncertainties : undefined;
	const found = compareDegrees(
		{ x: x.values, y: y.values, ...(uncertainties && { uncertainties }) },
		{ highest: Math.max(highest, cell.degree) },
	);
	if (isRefusal(found)) return undefined;
	const { degrees, leastLeaveOneOut, lastSignificant } = found;
	return {
		degrees: degrees.map(({ degree, fit, fStatistic, pValue, leaveOneOut }) => ({
			degree,
			residualStandardDeviation: fit.residualStandardDeviation,
			fStatistic,
			pValue,
			leaveOneOut,
		})),
		leastLeaveOneOut,
		lastSignificant,
	};
}
