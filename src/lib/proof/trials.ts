import type { Answers } from './answers';
import type { Figure } from './case';

/** Few enough for a build, many enough for two digits; the seed is fixed. */
export const trialOptions = { trials: 400_000, seed: 20_080_901 };

/**
 * How far a figure of trials may lie from the exact one, in standard uncertainties of the quantity: five standard errors
 * of a mean, of a standard deviation, and of a 2.5 % quantile, √(p(1−p)/M) over the density there, which for the shapes
 * here is 0.05/u or more. The shortest interval is placed worse than that, as its length hardly changes when it moves.
 */
const errors: Readonly<Record<string, number>> = {
	mean: 1,
	standardUncertainty: 1,
	symmetricLow: Math.sqrt(0.025 * 0.975) / 0.05,
	symmetricHigh: Math.sqrt(0.025 * 0.975) / 0.05,
	symmetricHalfWidth: Math.sqrt(0.025 * 0.975) / 0.05,
	shortestLow: 8,
	shortestHigh: 8,
	shortestLength: Math.sqrt(0.025 * 0.975) / 0.05,
};

/** Undefined for a figure that does not come from trials. */
export function scatterOf({ ask }: Figure, answers: Answers): number | undefined {
	if (ask?.[0] !== 'trials') return undefined;
	const { standardUncertainty, trials } = answers.trials(String(ask[2]));
	const error = errors[String(ask[1])];
	if (error === undefined) throw new Error(`No scatter of ${ask[1]}`);
	return (5 * error * standardUncertainty) / Math.sqrt(trials);
}
