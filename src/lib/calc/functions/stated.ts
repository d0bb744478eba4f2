import type { Distribution, ParameterFault } from '../doubt/distributions/distribution';
import { Trouble } from '../trouble';
import { differ, isPure, ofDimension, pure, spoken, type Type } from '../types';
import { expectNumber, expectPure, scalar, type Argument, type CalcFunction } from './function';

type About = Pick<CalcFunction, 'name' | 'signature' | 'help' | 'examples' | 'source'>;

/**
 * A function that states how a quantity deviates from its first value. `widths` are the positions of its half-widths
 * and uncertainties, which may be relative; the other values are pure numbers.
 */
export function stated(
	about: About,
	count: readonly [number, number],
	widths: readonly number[],
	distribution: (parameters: number[]) => Distribution | ParameterFault,
): CalcFunction {
	return {
		...about,
		count,
		type: (args) => {
			const [centre] = args;
			if (!centre) return pure;
			expectNumber(centre, 'States the uncertainty of');
			args.slice(1).forEach((argument, i) => {
				if (widths.includes(i + 1)) expectWidth(centre, argument);
				else expectPure(argument, 'This value');
			});
			return centre.type;
		},
		compute: ([centre = 0]) => centre,
		states: {
			centred: true,
			widths,
			distribution: (args) =>
				distribution(args.slice(1).map((value) => scalar(value, 'The parameter'))),
		},
	};
}

function expectWidth(centre: Argument, width: Argument): void {
	expectNumber(width, 'A half-width takes');
	if (width.type.point)
		throw new Trouble('dimension', width, 'A half-width is a difference, not a temperature.', {
			mend: 'Give it in kelvin: `0.5 K`.',
		});
	if (!differ(centre.type, width.type)) return;
	if (isPure(width.type) && !centre.type.point) return;
	if (isPure(width.type))
		throw new Trouble(
			'dimension',
			width,
			'A share of a temperature in °C says nothing: its zero is arbitrary.',
			{ mend: 'Give the half-width in kelvin: `0.5 K`.' },
		);
	throw new Trouble(
		'dimension',
		width,
		`The value is in ${spoken(centre.type)}, its half-width in ${spoken(width.type)}.`,
		{ mend: `Give it in ${spoken(difference(centre.type))}, or as a share such as \`1 %\`.` },
	);
}

/** Type of the difference of two values of a type. */
export function difference(type: Type): Type {
	return type.point && type.dimension ? ofDimension(type.dimension) : type;
}

/** Whether a width of that type is a share of its centre: it has no unit and the centre has, or it is typed in %, ppm. */
export function isRelative(centre: Type, width: Type): boolean {
	return isPure(width) && (!isPure(centre) || width.unit !== undefined);
}
