import { refuse, refuseNotFinite, refuseNotPositive, type Refusal } from './refusal';
import { findCrossing } from './root';
import type { Worked } from './worked';

// Temperatures in kelvin, resistances in ohms.

/** Resistance r0 · exp(beta (1/t − 1/t0)) of a thermistor. Derivatives by t, r0, t0, beta. */
export function ntcResistance(t: number, r0: number, t0: number, beta: number): Worked | Refusal {
	const fault = refuseNotPositive({ t, r0, t0, beta });
	if (fault) return fault;
	const value = r0 * Math.exp(beta * (1 / t - 1 / t0));
	if (!Number.isFinite(value))
		return refuse('overflow', 'The resistance is too large for a number');
	return {
		value,
		derivatives: [
			(-value * beta) / t ** 2,
			value / r0,
			(value * beta) / t0 ** 2,
			value * (1 / t - 1 / t0),
		],
	};
}

/** Temperature of a thermistor of r ohms. Derivatives by r, r0, t0, beta. */
export function ntcTemperature(r: number, r0: number, t0: number, beta: number): Worked | Refusal {
	const fault = refuseNotPositive({ r, r0, t0, beta });
	if (fault) return fault;
	const log = Math.log(r / r0);
	const inverse = 1 / t0 + log / beta;
	if (!(inverse > 0))
		return refuse('outOfRange', 'No temperature gives so low a resistance', { argument: 'r' });
	const value = 1 / inverse;
	const square = value ** 2;
	return {
		value,
		derivatives: [
			-square / (beta * r),
			square / (beta * r0),
			square / t0 ** 2,
			(square * log) / beta ** 2,
		],
	};
}

/** Temperature 1 / (a + b ln r + c (ln r)³), after Steinhart and Hart (Deep-Sea Research 15, 1968). Derivatives by r, a, b, c. */
export function steinhartTemperature(r: number, a: number, b: number, c: number): Worked | Refusal {
	const fault = refuseNotPositive({ r }) ?? refuseNotFinite({ a, b, c });
	if (fault) return fault;
	const log = Math.log(r);
	const inverse = a + log * (b + c * log ** 2);
	if (!(inverse > 0))
		return refuse('outOfRange', 'These coefficients give no temperature at this resistance', {
			argument: 'r',
		});
	const value = 1 / inverse;
	const square = value ** 2;
	return {
		value,
		derivatives: [
			(-square * (b + 3 * c * log ** 2)) / r,
			-square,
			-square * log,
			-square * log ** 3,
		],
	};
}

/** ln r beyond which no resistance is looked for: 10⁻²¹ to 10²¹ Ω. */
const farthest = 50;

/** Resistance of a thermistor with these coefficients at a temperature. Derivatives by t, a, b, c. */
export function steinhartResistance(t: number, a: number, b: number, c: number): Worked | Refusal {
	const fault = refuseNotPositive({ t }) ?? refuseNotFinite({ a, b, c });
	if (fault) return fault;
	if (b <= 0)
		return refuse('notPositive', 'b must be above zero: resistance falls with temperature', {
			argument: 'b',
		});
	const inverseAt = (log: number) => ({
		value: a + log * (b + c * log ** 2),
		derivative: b + 3 * c * log ** 2,
	});
	// With a negative c the curve turns at this logarithm.
	const end = c < 0 ? Math.min(farthest, Math.sqrt(-b / (3 * c))) : farthest;
	const wanted = 1 / t;
	if (!(wanted > inverseAt(-end).value && wanted < inverseAt(end).value))
		return refuse('outOfRange', 'These coefficients give no resistance at this temperature', {
			argument: 't',
		});
	const log = findCrossing(inverseAt, wanted, -end, end);
	const value = Math.exp(log);
	const perInverse = value / inverseAt(log).derivative;
	return {
		value,
		derivatives: [-perInverse / t ** 2, -perInverse, -perInverse * log, -perInverse * log ** 3],
	};
}
