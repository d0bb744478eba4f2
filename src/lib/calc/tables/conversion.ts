import { refuse, refuseNotPositive, type Refusal } from './refusal';
import type { Worked } from './worked';

const mostBits = 32;

/** Refuses a resolution that is no whole number from 1 to 32. */
function refuseBits(bits: number): Refusal | undefined {
	if (Number.isInteger(bits) && bits >= 1 && bits <= mostBits) return undefined;
	return refuse('outOfRange', `bits must be a whole number from 1 to ${mostBits}`, {
		argument: 'bits',
	});
}

/**
 * Time for an RC input to settle to within `errorLsb` steps of a full-scale change: rs · c · ln(2^bits / errorLsb).
 * Derivatives by rs, c, bits, errorLsb.
 */
export function settling(rs: number, c: number, bits: number, errorLsb = 0.5): Worked | Refusal {
	const fault = refuseNotPositive({ rs, c, errorLsb }) ?? refuseBits(bits);
	if (fault) return fault;
	if (errorLsb >= 2 ** bits)
		return refuse('outOfRange', 'The error allowed is the whole range, so nothing has to settle', {
			argument: 'errorLsb',
		});
	const constants = bits * Math.LN2 - Math.log(errorLsb);
	const tau = rs * c;
	return {
		value: tau * constants,
		derivatives: [c * constants, rs * constants, tau * Math.LN2, -tau / errorLsb],
	};
}

/** Half a step of a converter: half-width of its quantisation error, vref / 2^(bits + 1). Derivative by vref. */
export function quantisation(vref: number, bits: number): Worked | Refusal {
	const fault = refuseNotPositive({ vref }) ?? refuseBits(bits);
	if (fault) return fault;
	const perVolt = 2 ** -(bits + 1);
	return { value: vref * perVolt, derivatives: [perVolt] };
}
