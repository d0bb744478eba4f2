import { refuseNotPositive, type Refusal } from './refusal';
import type { Worked } from './worked';

/** Boltzmann constant in J/K, exact since 2019 (SI Brochure, 9th edition, 2.2). */
const boltzmann = 1.380649e-23;

/**
 * Thermal noise voltage √(4 k t r bandwidth), rms, of r ohms at t kelvin over a bandwidth in hertz (Nyquist, Physical
 * Review 32, 1928, pages 110 to 113). Derivatives by r, t, bandwidth.
 */
export function johnson(r: number, t: number, bandwidth: number): Worked | Refusal {
	const fault = refuseNotPositive({ r, t, bandwidth });
	if (fault) return fault;
	const value = 2 * Math.sqrt(boltzmann * t) * Math.sqrt(r * bandwidth);
	return { value, derivatives: [r, t, bandwidth].map((of) => value / (2 * of)) };
}
