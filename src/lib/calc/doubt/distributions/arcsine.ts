import { placed, positiveFault, type Distribution, type ParameterFault } from './distribution';

/** U-shaped (arcsine) of half-width a: a sine of unknown phase. Parameters: a. */
export function arcsine(a: number): Distribution | ParameterFault {
	const fault = positiveFault(a, 1, 'The half-width');
	return fault ?? { kind: 'arcsine', parameters: [a], uncertainty: a / Math.SQRT2, dof: Infinity };
}

/** JCGM 101:2008, 6.4.6. */
export const arcsineShape = placed(
	([a = 0]) => a,
	([a = 0], _random, into, count) => {
		for (let i = 0; i < count; i++) into[i] = a * Math.sin(Math.PI * (into[i]! - 0.5));
	},
);
