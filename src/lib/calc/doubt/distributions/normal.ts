import { positiveFault, type Distribution, type ParameterFault, type Shape } from './distribution';

/** Normal with standard uncertainty u, or with expanded uncertainty and coverage factor k. Parameters: u. */
export function normal(uncertainty: number, k = 1): Distribution | ParameterFault {
	const fault =
		positiveFault(
			uncertainty,
			1,
			k === 1 ? 'The standard uncertainty' : 'The expanded uncertainty',
		) ?? positiveFault(k, 2, 'The coverage factor');
	const u = uncertainty / k;
	return fault ?? { kind: 'normal', parameters: [u], uncertainty: u, dof: Infinity };
}

/** JCGM 101:2008, 6.4.7. */
export const normalShape: Shape = {
	halfWidth: ([u = 0], sigmas) => sigmas * u,
	fill([u = 0], random, into, count) {
		random.normals(into, count);
		for (let i = 0; i < count; i++) into[i]! *= u;
	},
};
