import { placed, positiveFault, type Distribution, type ParameterFault } from './distribution';

/** Rectangular of half-width a. Parameters: a. */
export function rectangular(a: number): Distribution | ParameterFault {
	const fault = positiveFault(a, 1, 'The half-width');
	return (
		fault ?? { kind: 'rectangular', parameters: [a], uncertainty: a / Math.sqrt(3), dof: Infinity }
	);
}

/** JCGM 101:2008, 6.4.2. */
export const rectangularShape = placed(
	([a = 0]) => a,
	([a = 0], _random, into, count) => {
		for (let i = 0; i < count; i++) into[i] = a * (2 * into[i]! - 1);
	},
);
