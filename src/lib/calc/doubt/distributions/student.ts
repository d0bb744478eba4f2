import type { Random } from '../random';
import { positiveFault, type Distribution, type ParameterFault, type Shape } from './distribution';

/** Scaled t with `dof` degrees of freedom; u is its scale, not its standard deviation. Parameters: u, dof. */
export function student(u: number, dof: number): Distribution | ParameterFault {
	const fault =
		positiveFault(u, 1, 'The standard uncertainty') ??
		(dof === Infinity ? undefined : positiveFault(dof, 2, 'The number of degrees of freedom'));
	return fault ?? { kind: 'student', parameters: [u, dof], uncertainty: u, dof };
}

/**
 * JCGM 101:2008, 6.4.9, drawn by the polar method of R. W. Bailey, Mathematics of Computation 62 (1994), 779. For the
 * worst case it has no ends, and counts like a normal one.
 */
export const studentShape: Shape = {
	halfWidth: ([u = 0], sigmas) => sigmas * u,
	fill([u = 0, dof = 1], random, into, count) {
		if (dof === Infinity) random.normals(into, count);
		for (let i = 0; i < count; i++)
			into[i] = u * (dof === Infinity ? into[i]! : polar(random, dof));
	},
};

function polar(random: Random, dof: number): number {
	for (;;) {
		const x = 2 * random.uniform() - 1;
		const y = 2 * random.uniform() - 1;
		const w = x * x + y * y;
		if (w < 1) return x * Math.sqrt((dof * (Math.pow(w, -2 / dof) - 1)) / w);
	}
}
