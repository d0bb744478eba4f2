import { fitPolynomial, type Fit } from '$lib/calc/curves/fit';
import { predict } from '$lib/calc/curves/predict';
import { isRefusal } from '$lib/calc/tables/refusal';
import { expect, it } from 'vitest';

// JCGM 100:2008, H.3, table H.6: calibration of a thermometer, b(t) = y1 + y2 (t − 20 °C). Source seen, recomputed,
// where nothing else is said.
const t = [21.521, 22.012, 22.512, 23.003, 23.507, 23.999, 24.513, 25.002, 25.503, 26.01, 26.511];
const b = [-171, -169, -166, -159, -164, -165, -156, -157, -159, -161, -160].map((mK) => mK / 1000);

function line(zero: number): Fit {
	const fit = fitPolynomial({ x: t.map((value) => value - zero), y: b }, { degree: 1 });
	if (isRefusal(fit)) throw new Error(fit.message);
	return fit;
}

function correlation({ covariance, standardUncertainties: [first = 0, second = 0] }: Fit): number {
	return (covariance[0]?.[1] ?? Number.NaN) / (first * second);
}

it('gives the line, its uncertainties and their correlation as printed', () => {
	const fit = line(20);
	expect(fit.coefficients[0]?.toFixed(4)).toBe('-0.1712');
	expect(fit.standardUncertainties[0]?.toFixed(4)).toBe('0.0029');
	expect(fit.coefficients[1]?.toFixed(5)).toBe('0.00218');
	expect(fit.standardUncertainties[1]?.toFixed(5)).toBe('0.00067');
	expect(correlation(fit).toFixed(3)).toBe('-0.930');
	expect(fit.degreesOfFreedom).toBe(9);
	// From memory, recomputed.
	expect(fit.residualStandardDeviation?.toFixed(4)).toBe('0.0035');
	// Printed in the documentation of a public GUM calculator.
	expect(fit.residualSquares).toBeCloseTo(0.000110096583109, 15);
});

it('gives unrounded figures that agree with a recomputation of H.3', () => {
	const fit = line(20);
	expect(fit.coefficients[0]).toBeCloseTo(-0.171203790131, 12);
	expect(fit.coefficients[1]).toBeCloseTo(0.00218269773989, 14);
	expect(fit.standardUncertainties[0]).toBeCloseTo(0.00287759783516, 14);
	expect(fit.standardUncertainties[1]).toBeCloseTo(0.000667938773228, 14);
	expect(correlation(fit)).toBeCloseTo(-0.930429603093, 11);
});

it('predicts the correction at 30 °C with the correlation, and keeps a new reading apart from the mean', () => {
	const at30 = predict(line(20), 10);
	if (isRefusal(at30)) throw new Error(at30.message);
	expect(at30.value.toFixed(4)).toBe('-0.1494');
	expect(at30.standardUncertainty.toFixed(4)).toBe('0.0041');
	expect(at30.standardUncertainty).toBeCloseTo(0.00413859575285, 13);
	// Recomputed: the Guide does not ask for a new reading's.
	expect(at30.readingUncertainty).toBeCloseTo(0.00542, 5);
	expect(at30.inside).toBe(false);
});

it('has uncorrelated coefficients about the mean temperature (H.3.5, digits from memory, recomputed)', () => {
	const fit = line(t.reduce((sum, value) => sum + value, 0) / t.length);
	expect(fit.coefficients[0]).toBeCloseTo(-0.162454545455, 11);
	expect(fit.standardUncertainties[0]).toBeCloseTo(0.00105455521338, 13);
	expect(correlation(fit)).toBeCloseTo(0, 12);
});
