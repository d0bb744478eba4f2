import type { Curve, Evaluation, MonteCarlo, Quantity } from '$lib/calc/results';

/** Reads figures from the results of a note. Throws where a figure is not there. */
export class Answers {
	constructor(private readonly results: Evaluation) {}

	/** What a figure asks: the question, then the names and places it is asked of. */
	read([question = '', ...of]: readonly (string | number)[]): number | string {
		const ask = questions[String(question)];
		if (!ask) throw new Error(`No question ${question}`);
		return ask(this, String(of[0]), of[1], of[2]);
	}

	quantity(name: string): Quantity {
		return present(this.results.quantities[name], name);
	}

	curve(name: string): Curve {
		return present(this.results.curves?.[name], name);
	}

	/** Value of a quantity in its unit; its text where it is no number. */
	value(name: string): number | string {
		const { value, readout } = this.quantity(name);
		return value ?? readout.number;
	}

	requirement(cell: string) {
		return present(
			this.results.requirements.find((each) => each.cell === cell),
			cell,
		);
	}

	trials(name: string): MonteCarlo {
		return present(this.quantity(name).monteCarlo, `trials of ${name}`);
	}
}

type Question = (
	answers: Answers,
	name: string,
	second?: string | number,
	third?: string | number,
) => number | string;

const questions: Readonly<Record<string, Question>> = {
	standardUncertainty: (all, name) => present(all.quantity(name).standardUncertainty, name),
	degreesOfFreedom: (all, name) => present(all.quantity(name).degreesOfFreedom, name),
	truncatedDegreesOfFreedom: (all, name) =>
		Math.floor(present(all.quantity(name).degreesOfFreedom, name)),
	coverageFactor: (all, name) => present(all.quantity(name).coverageFactor, name),
	expandedUncertainty: (all, name) => present(all.quantity(name).expandedUncertainty, name),
	low: (all, name) => present(all.quantity(name).value, name) - expanded(all, name),
	high: (all, name) => present(all.quantity(name).value, name) + expanded(all, name),
	contribution: (all, name, input) =>
		present(
			all.quantity(name).budget?.find((row) => row.input === input),
			`${input} in ${name}`,
		).contribution,
	probability: (all, cell) => all.requirement(cell).probability,
	improbability: (all, cell) => 1 - all.requirement(cell).probability,
	verdict: (all, cell) => all.requirement(cell).verdict,
	coefficient: (all, name, power) => coefficient(all, name, power).value,
	coefficientUncertainty: (all, name, power) => coefficient(all, name, power).standardUncertainty,
	coefficientCorrelation: (all, name, first, second) =>
		present(all.curve(name).covariance[Number(first)]?.[Number(second)], name) /
		(coefficient(all, name, first).standardUncertainty *
			coefficient(all, name, second).standardUncertainty),
	residualStandardDeviation: (all, name) =>
		present(all.curve(name).residualStandardDeviation, name),
	residualSquares: (all, name) => all.curve(name).residuals.reduce((sum, r) => sum + r * r, 0),
	rSquared: (all, name) => present(all.curve(name).rSquared, name),
	fStatistic: (all, name, total) => fStatistic(all.curve(name), Number(all.value(String(total)))),
	curveDegreesOfFreedom: (all, name) => all.curve(name).degreesOfFreedom,
	trials: (all, what, name) => trialFigure(all.trials(String(name)), what),
};

function expanded(all: Answers, name: string): number {
	return present(all.quantity(name).expandedUncertainty, name);
}

/** Of the whole regression; `total` is the sum of the squared deviations of y. */
function fStatistic(curve: Curve, total: number): number {
	const variance = present(curve.residualStandardDeviation, 'residuals') ** 2;
	return (total - variance * curve.degreesOfFreedom) / curve.degree / variance;
}

function coefficient(all: Answers, name: string, power?: string | number) {
	return present(all.curve(name).coefficients[Number(power)], `${name}, power ${power}`);
}

function trialFigure(trials: MonteCarlo, what: string): number {
	const { mean, standardUncertainty, symmetric, shortest } = trials;
	const figures: Record<string, number> = {
		mean,
		standardUncertainty,
		symmetricLow: symmetric[0],
		symmetricHigh: symmetric[1],
		symmetricHalfWidth: (symmetric[1] - symmetric[0]) / 2,
		shortestLow: shortest[0],
		shortestHigh: shortest[1],
		shortestLength: shortest[1] - shortest[0],
	};
	return present(figures[what], what);
}

function present<T>(found: T | null | undefined, what: string): T {
	if (found === null || found === undefined) throw new Error(`The results have no ${what}`);
	return found;
}
