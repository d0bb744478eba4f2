import { refuseNotPositive, refuseOutside, type Refusal } from './refusal';
import { findCrossing, type Slope } from './root';
import type { Worked } from './worked';

// IEC 60751:2022 (the same equation as in 2008), in °C and ohms.
const a = 3.9083e-3;
const b = -5.775e-7;
const c = -4.183e-12;
const coldest = -200;
const hottest = 850;
/** Half a unit of the last digit that the standard's table prints, so that its end points can be read back. */
const tableRounding = 0.005 / 100;

/** Resistance divided by that at 0 °C. */
function ratioAt(t: number): Slope {
	const value = 1 + t * (a + t * b);
	const derivative = a + 2 * b * t;
	if (t >= 0) return { value, derivative };
	return {
		value: value + c * (t - 100) * t ** 3,
		derivative: derivative + c * t ** 2 * (4 * t - 300),
	};
}

const lowest = ratioAt(coldest).value;
const highest = ratioAt(hottest).value;

/** Resistance of an industrial platinum thermometer at t in °C, −200 to 850, with r0 at 0 °C. Derivatives by t, r0. */
export function platinumResistance(t: number, r0: number): Worked | Refusal {
	const fault = refuseNotPositive({ r0 }) ?? refuseOutside('t', t, coldest, hottest, '°C');
	if (fault) return fault;
	const { value, derivative } = ratioAt(t);
	return { value: r0 * value, derivatives: [r0 * derivative, value] };
}

/** Temperature in °C of an industrial platinum thermometer of r ohms, with r0 at 0 °C. Derivatives by r, r0. */
export function platinumTemperature(r: number, r0: number): Worked | Refusal {
	const fault =
		refuseNotPositive({ r0 }) ??
		refuseOutside(
			'r',
			r,
			rounded(r0 * (lowest - tableRounding)),
			rounded(r0 * (highest + tableRounding)),
			'Ω',
		);
	if (fault) return fault;
	const ratio = r / r0;
	const value = ratio >= 1 ? aboveZero(ratio) : findCrossing(ratioAt, ratio, coldest - 1, 0);
	const slope = r0 * ratioAt(value).derivative;
	return { value, derivatives: [1 / slope, -ratio / slope] };
}

/** Root of the quadratic, written so that nothing cancels near 0 °C. */
function aboveZero(ratio: number): number {
	return (2 * (ratio - 1)) / (a + Math.sqrt(a ** 2 + 4 * b * (ratio - 1)));
}

function rounded(resistance: number): number {
	return Number(resistance.toPrecision(6));
}
