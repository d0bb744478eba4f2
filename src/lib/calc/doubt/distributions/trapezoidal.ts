import { placed, positiveFault, type Distribution, type ParameterFault } from './distribution';

/** Symmetric trapezoid of half-width a at the base and b at the top. Parameters: a, b. */
export function trapezoidal(a: number, b: number): Distribution | ParameterFault {
	const fault = positiveFault(a, 1, 'The half-width at the base') ?? topFault(a, b);
	const uncertainty = Math.sqrt((a * a + b * b) / 6);
	return fault ?? { kind: 'trapezoidal', parameters: [a, b], uncertainty, dof: Infinity };
}

function topFault(a: number, b: number): ParameterFault | undefined {
	if (!Number.isFinite(b))
		return {
			fault: 'notFinite',
			parameter: 2,
			message: 'The half-width at the top must be a finite number',
		};
	if (b < 0)
		return {
			fault: 'notPositive',
			parameter: 2,
			message: 'The half-width at the top cannot be negative',
		};
	if (b > a)
		return {
			fault: 'order',
			parameter: 2,
			message: 'A trapezoid is not wider at the top than at the base',
		};
	return undefined;
}

/** JCGM 101:2008, 6.4.4, by its inverse distribution function. */
export const trapezoidalShape = placed(
	([a = 0]) => a,
	([a = 0, b = 0], _random, into, count) => {
		const sum = a + b;
		const flank = 2 * sum * (a - b);
		const ramp = (a - b) / (2 * sum);
		for (let i = 0; i < count; i++) {
			const p = into[i]!;
			if (p < ramp) into[i] = Math.sqrt(flank * p) - a;
			else if (p > 1 - ramp) into[i] = a - Math.sqrt(flank * (1 - p));
			else into[i] = (p - 0.5) * sum;
		}
	},
);
