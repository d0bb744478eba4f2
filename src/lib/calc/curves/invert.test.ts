import { isRefusal } from '$lib/calc/tables/refusal';
import fc from 'fast-check';
import { expect, it } from 'vitest';
import { fitPolynomial, type Fit } from './fit';
import { invert, refuseNotMonotonic, type Inversion } from './invert';
import { predict } from './predict';
import { turningPoints } from './turning-points';

function through(of: (x: number) => number, x: number[], degree: number): Fit {
	const fit = fitPolynomial({ x, y: x.map(of) }, { degree });
	if (isRefusal(fit)) throw new Error(fit.message);
	return fit;
}

function inverted(fit: Fit, y: number): Inversion {
	const answer = invert(fit, y);
	if (isRefusal(answer)) throw new Error(answer.message);
	return answer;
}

const steps = Array.from({ length: 21 }, (_, i) => i / 4);

it('undoes a prediction anywhere on the range of a rising cubic', () => {
	const fit = through((x) => 1 + 2 * x + 0.3 * x ** 3, steps, 3);
	fc.assert(
		fc.property(fc.double({ min: 0, max: 5, noNaN: true }), (x) => {
			const there = predict(fit, x);
			if (isRefusal(there)) throw new Error(there.message);
			const back = inverted(fit, there.value);
			expect(back.value).toBeCloseTo(x, 12);
			expect(back.derivative).toBeCloseTo(1 / there.derivative, 10);
		}),
	);
});

it('inverts a falling line, ends included, and refuses values beyond them', () => {
	const fit = through((x) => 7 - 2 * x, steps, 1);
	expect(inverted(fit, 7).value).toBeCloseTo(0, 14);
	expect(inverted(fit, -3).value).toBeCloseTo(5, 14);
	expect(inverted(fit, 1).derivative).toBeCloseTo(-0.5, 14);
	const beyond = invert(fit, 7.1);
	expect(isRefusal(beyond) && beyond.message).toBe('The curve runs from -3 to 7 here');
});

it('carries the uncertainty of the curve: that of y divided by the slope', () => {
	const noisy = (x: number) => 3 * x + (Math.round(x * 4) % 2 ? 0.1 : -0.1);
	const fit = through(noisy, steps, 1);
	const back = inverted(fit, 6);
	const there = predict(fit, back.value);
	if (isRefusal(there)) throw new Error(there.message);
	expect(back.standardUncertainty).toBeCloseTo(there.standardUncertainty / there.derivative, 14);
});

it('says where a curve turns', () => {
	const cubic = through((x) => (x - 1) * (x - 2) * (x - 4), steps, 3);
	// Where 3x² − 14x + 14 is zero.
	expect(turningPoints(cubic)[0]).toBeCloseTo((7 - Math.sqrt(7)) / 3, 10);
	expect(turningPoints(cubic)[1]).toBeCloseTo((7 + Math.sqrt(7)) / 3, 10);
	const answer = invert(cubic, 0);
	expect(isRefusal(answer) && answer.message).toBe(
		'The curve turns at x = 1.45142, 3.21525, so it has no inverse',
	);
});

it('does not take a turn outside the readings, or a level point on the way up, for a turn inside', () => {
	expect(turningPoints(through((x) => (x + 1) ** 2, steps, 2))).toEqual([]);
	expect(refuseNotMonotonic(through((x) => (x - 2.5) ** 3, steps, 3))).toBeUndefined();
});

it('refuses a level curve', () => {
	const level = through(() => 4, steps, 0);
	const answer = invert(level, 4);
	expect(isRefusal(answer) && answer.message).toBe('The curve is level, so it has no inverse');
});
