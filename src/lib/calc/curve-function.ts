import type { Fit } from './curves/fit';
import { invert } from './curves/invert';
import { predict } from './curves/predict';
import type { External } from './doubt/tape';
import { answered } from './functions/answered';
import { expectNumber, type CalcFunction } from './functions/function';
import type { Step } from './steps';
import { isRefusal } from './tables/refusal';
import { Trouble } from './trouble';
import { differ, spoken, type Type } from './types';
import { differenceFromSI, fromSI, toSI, type Unit } from './units/unit';
import { map } from './values';

/** One side of a curve: what its numbers are, and the unit that it was fitted in. */
export interface Axis {
	type: Type;
	unit: Unit;
}

/** A curve as a function of the note, forwards or backwards. */
export interface CurveFunction {
	fn: CalcFunction;
	/** The function with deviations of the fit, which are inputs of the note, as operands after the first. */
	external: External;
	/** Deviations of the fit; empty until they are numbered. */
	deviations: Step[];
}

/** What a curve says at a point, numbers in the units of the fit. */
type Answer = ReturnType<typeof predict> | ReturnType<typeof invert>;

/** y of the fit at x. */
export function forwards(name: string, fit: Fit, x: Axis, y: Axis): CurveFunction {
	return curveFunction(name, (at) => predict(fit, at), x, y);
}

/** x of the fit where it has a value of y, on the range of its readings. */
export function backwards(name: string, fit: Fit, x: Axis, y: Axis): CurveFunction {
	return curveFunction(name, (at) => invert(fit, at), y, x);
}

function curveFunction(
	name: string,
	answer: (at: number) => Answer,
	from: Axis,
	to: Axis,
): CurveFunction {
	const scale = toSI(1, to.unit) - toSI(0, to.unit);
	const perUnit = differenceFromSI(1, from.unit);
	const at = (si: number) => answer(fromSI(si, from.unit));
	return {
		fn: {
			name,
			signature: `${name}(x)`,
			help: 'A curve of the note.',
			examples: [],
			count: [1, 1],
			type: ([argument]) => {
				if (!argument) return to.type;
				expectNumber(argument, 'A curve takes');
				if (differ(argument.type, from.type))
					throw new Trouble(
						'dimension',
						argument,
						`\`${name}\` takes ${spoken(from.type)}, not ${spoken(argument.type)}.`,
					);
				return to.type;
			},
			compute: ([x = 0]) => map(x, (si) => toSI(answered(at(si)).value, to.unit)),
		},
		external: {
			name,
			value: (operands) => {
				const found = at(operands[0]!);
				if (isRefusal(found)) return NaN;
				const deviation = found.parts.reduce((sum, part, i) => sum + part * operands[i + 1]!, 0);
				return toSI(found.value + deviation, to.unit);
			},
			slopes: (operands, into) => {
				const found = at(operands[0]!);
				if (isRefusal(found)) return into.fill(NaN);
				into[0] = found.derivative * scale * perUnit;
				found.parts.forEach((part, i) => (into[i + 1] = part * scale));
				return into;
			},
		},
		deviations: [],
	};
}
