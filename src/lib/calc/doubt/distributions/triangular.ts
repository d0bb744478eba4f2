import { placed, positiveFault, type Distribution, type ParameterFault } from './distribution';

/** Symmetric triangular of half-width a. Parameters: a. */
export function triangular(a: number): Distribution | ParameterFault {
	const fault = positiveFault(a, 1, 'The half-width');
	return (
		fault ?? { kind: 'triangular', parameters: [a], uncertainty: a / Math.sqrt(6), dof: Infinity }
	);
}

/** JCGM 101:2008, 6.4.5, by its inverse distribution function. */
export const triangularShape = placed(
	([a = 0]) => a,
	([a = 0], _random, into, count) => {
		for (let i = 0; i < count; i++) {
			const p = into[i]!;
			into[i] = p < 0.5 ? a * (Math.sqrt(2 * p) - 1) : a * (1 - Math.sqrt(2 * (1 - p)));
		}
	},
);
