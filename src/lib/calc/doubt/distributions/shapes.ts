import { arcsineShape } from './arcsine';
import {
	positiveFault,
	type Distribution,
	type Kind,
	type ParameterFault,
	type Shape,
} from './distribution';
import { inexactRectangularShape } from './inexact-rectangular';
import { normalShape } from './normal';
import { rectangularShape } from './rectangular';
import { studentShape } from './student';
import { trapezoidalShape } from './trapezoidal';
import { triangularShape } from './triangular';

export const shapes: Readonly<Record<Kind, Shape>> = {
	normal: normalShape,
	rectangular: rectangularShape,
	triangular: triangularShape,
	arcsine: arcsineShape,
	trapezoidal: trapezoidalShape,
	inexactRectangular: inexactRectangularShape,
	student: studentShape,
};

/** Half-width of an input's interval for the worst case; a distribution without ends counts with ± 3 u. */
export function halfWidth({ kind, parameters }: Distribution, sigmas = 3): number {
	return shapes[kind].halfWidth(parameters, sigmas);
}

/** The same distribution with degrees of freedom; a normal one becomes a t distribution (JCGM 101:2008, 6.4.9). */
export function withDof(distribution: Distribution, dof: number): Distribution | ParameterFault {
	const fault = positiveFault(dof, 1, 'The number of degrees of freedom');
	if (fault) return fault;
	const { kind, uncertainty: u } = distribution;
	if (kind === 'normal' || kind === 'student')
		return { kind: 'student', parameters: [u, dof], uncertainty: u, dof };
	return { ...distribution, dof };
}
