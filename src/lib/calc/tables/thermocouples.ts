import { compensatedPolynomial } from './polynomial';
import { refuse, refuseNotFinite, refuseOutside, type Refusal } from './refusal';
import { findCrossing, type Slope } from './root';
import { referenceFunctions, type Range, type ThermocoupleType } from './thermocouple-coefficients';
import type { Worked } from './worked';

/** Half a microvolt: the rounding of the published tables, so that their end points can be read back. */
const tableRounding = 0.0005;
/** How far below and above a range its function is still followed for that. */
const beyondEnds = 3;

/** The type of a letter. */
export function thermocoupleType(letter: string): ThermocoupleType | Refusal {
	if (Object.hasOwn(referenceFunctions, letter)) return letter as ThermocoupleType;
	return refuse('text', `There is no table for thermocouples of type ${letter}`, {
		argument: 'type',
		mend: 'Types are K, J, T, N and S.',
	});
}

/** Voltage in mV with the measuring junction at t in °C and the reference junction at 0 °C. Derivative by t. */
export function thermocoupleVoltage(type: ThermocoupleType, t: number): Worked | Refusal {
	const ranges = referenceFunctions[type];
	const [first, last] = [ranges[0]!, ranges.at(-1)!];
	const fault = refuseOutside('t', t, first.from, last.to, '°C');
	if (fault) return fault;
	const { value, derivative } = along(ranges.find(({ to }) => t <= to) ?? last, t);
	return { value, derivatives: [derivative] };
}

/**
 * Temperature in °C at a voltage in mV, the reference junction at 0 °C, solved from the reference function itself.
 * Derivative by e. Every type's voltage rises with temperature over its whole table; between neighbouring ranges it
 * may jump by less than 0.1 nV, and a voltage inside a jump belongs to their border.
 */
export function thermocoupleTemperature(type: ThermocoupleType, e: number): Worked | Refusal {
	const ranges = referenceFunctions[type];
	const [first, last] = [ranges[0]!, ranges.at(-1)!];
	const lowest = along(first, first.from).value - tableRounding;
	const highest = along(last, last.to).value + tableRounding;
	if (!(e >= lowest && e <= highest)) return refuseVoltage(type, e, [lowest, highest]);
	const range = ranges.find((one) => e <= along(one, one.to).value) ?? last;
	const value = within(range, e, range === first, range === last);
	return { value, derivatives: [1 / along(range, value).derivative] };
}

function within(range: Range, e: number, first: boolean, last: boolean): number {
	const of = (t: number) => along(range, t);
	if (!first && e <= of(range.from).value) return range.from;
	const low = e < of(range.from).value ? range.from - beyondEnds : range.from;
	const high = last && e > of(range.to).value ? range.to + beyondEnds : range.to;
	return findCrossing(of, e, low, high);
}

function along({ coefficients, exponential }: Range, t: number): Slope {
	const { value, derivative } = compensatedPolynomial(t, coefficients);
	if (!exponential) return { value, derivative };
	const [a0, a1, a2] = exponential;
	const bump = a0 * Math.exp(a1 * (t - a2) ** 2);
	return { value: value + bump, derivative: derivative + 2 * a1 * (t - a2) * bump };
}

function refuseVoltage(type: ThermocoupleType, e: number, [lowest, highest]: [number, number]) {
	const fault = refuseNotFinite({ e });
	if (fault) return fault;
	const [from, to] = [lowest + tableRounding, highest - tableRounding];
	return refuse(
		'outOfRange',
		`A thermocouple of type ${type} gives ${from.toFixed(3)} to ${to.toFixed(3)} mV`,
		{ argument: 'e' },
	);
}
