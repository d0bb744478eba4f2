import { fitPolynomial } from '$lib/calc/curves/fit';
import { predict } from '$lib/calc/curves/predict';
import { isRefusal } from '$lib/calc/tables/refusal';
import { findCase } from '$lib/proof/cases';
import { expect, it } from 'vitest';

it('keeps the doubt of a new reading apart from that of the line (JCGM 100:2008, H.3, recomputed)', () => {
	const [t, b] = findCase('gum-h3-fit').readings!;
	const fit = fitPolynomial({ x: t!.values, y: b!.values }, { degree: 1 });
	if (isRefusal(fit)) throw new Error(fit.message);
	// At 30 °C; temperatures count from 20 °C. The Guide does not ask for a new reading's.
	const at30 = predict(fit, 10);
	if (isRefusal(at30)) throw new Error(at30.message);
	expect(at30.standardUncertainty).toBeCloseTo(0.00413859575285, 13);
	expect(at30.readingUncertainty).toBeCloseTo(0.00542, 5);
	expect(at30.inside).toBe(false);
});
