/** Coefficients of the Lanczos approximation with g = 7, good to 15 digits (common practice, no source). */
const lanczos = [
	0.99999999999980993, 676.5203681218851, -1259.1392167224028, 771.32342877765313,
	-176.61502916214059, 12.507343278686905, -0.13857109526572012, 9.9843695780195716e-6,
	1.5056327351493116e-7,
];

function logGamma(x: number): number {
	const t = x + 6.5;
	const sum = lanczos.reduce((total, c, i) => (i === 0 ? c : total + c / (x - 1 + i)), 0);
	return 0.5 * Math.log(2 * Math.PI) + (x - 0.5) * Math.log(t) - t + Math.log(sum);
}

/** Density of the standard normal distribution, or of Student's t with degrees of freedom. */
export function density(t: number, dof: number | null): number {
	// Beyond this the two do not differ on a screen, and the difference of logarithms loses digits.
	if (dof === null || dof > 1e6) return Math.exp(-0.5 * t * t) / Math.sqrt(2 * Math.PI);
	const log = logGamma((dof + 1) / 2) - logGamma(dof / 2) - 0.5 * Math.log(dof * Math.PI);
	return Math.exp(log - ((dof + 1) / 2) * Math.log1p((t * t) / dof));
}
