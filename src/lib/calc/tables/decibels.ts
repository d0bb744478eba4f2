import { refuse, refuseNotFinite, refuseNotPositive, type Refusal } from './refusal';
import type { Worked } from './worked';

/** What a level is of: amplitudes count 20 lg, powers 10 lg of their ratio (NIST SP 811, 2008, 8.7). */
export type LevelOf = 'amplitude' | 'power';

const factors: Readonly<Record<LevelOf, number>> = { amplitude: 20, power: 10 };

/** Level in dB of `quantity` against `reference`, both of one unit: 1 V for dBV, 1 mW for dBm. Derivatives by quantity, reference. */
export function level(quantity: number, reference: number, of: LevelOf): Worked | Refusal {
	const fault = refuseNotPositive({ quantity, reference });
	if (fault) return fault;
	const perLog = factors[of] / Math.LN10;
	return {
		value: factors[of] * (Math.log10(quantity) - Math.log10(reference)),
		derivatives: [perLog / quantity, -perLog / reference],
	};
}

/** Ratio of amplitudes or powers at a level in dB. Derivative by decibels. */
export function ratioOf(decibels: number, of: LevelOf): Worked | Refusal {
	const fault = refuseNotFinite({ decibels });
	if (fault) return fault;
	const value = 10 ** (decibels / factors[of]);
	if (value > 0 && Number.isFinite(value))
		return { value, derivatives: [(value * Math.LN10) / factors[of]] };
	return refuse('overflow', 'The ratio at this level is beyond what a number holds', {
		argument: 'decibels',
	});
}
