import { placed, positiveFault, type Distribution, type ParameterFault } from './distribution';

/** Rectangular whose half-width a is itself known to ± d only (curvilinear trapezoid). Parameters: a, d. */
export function inexactRectangular(a: number, d: number): Distribution | ParameterFault {
	const fault =
		positiveFault(a, 1, 'The half-width') ??
		positiveFault(d, 2, 'The inexactness of the half-width') ??
		(d > a
			? ({
					fault: 'order',
					parameter: 2,
					message: 'A half-width cannot be inexact by more than itself',
				} as const)
			: undefined);
	const uncertainty = Math.sqrt((a * a) / 3 + (d * d) / 9);
	return fault ?? { kind: 'inexactRectangular', parameters: [a, d], uncertainty, dof: Infinity };
}

/** JCGM 101:2008, 6.4.3: a half-width is drawn for each trial. */
export const inexactRectangularShape = placed(
	([a = 0, d = 0]) => a + d,
	([a = 0, d = 0], random, into, count) => {
		for (let i = 0; i < count; i++)
			into[i] = (a + d * (2 * random.uniform() - 1)) * (2 * into[i]! - 1);
	},
);
