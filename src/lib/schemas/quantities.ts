import type { MonteCarlo, Quantity } from '$lib/calc/results';
import type { UnitChoice } from '$lib/calc/units/compatible';
import { z } from 'zod';
import { typed } from './text';

/** What stands behind a worked line. */
export interface QuantityDetail {
	/** Sequence number of the note's last change that counts in it. */
	seq: number;
	/** With its budget and worst case where it is in doubt. */
	quantity: Quantity;
	/** HTML; null where the formula cannot be set. */
	formula: { symbols: string; figures: string | null } | null;
}

export const trialsRequest = z.strictObject({
	quantity: z.string().min(1).max(100),
	/** Whether trials end once the results are stable. */
	adaptive: z.boolean(),
});

/** A line of the answer while trials are drawn: how far they are, and at the end what they gave or why nothing. */
export type TrialsLine =
	| { drawn: number; total: number }
	| { quantity: Quantity & { monteCarlo: MonteCarlo } }
	| { message: string };

/** A unit that somebody typed, to be looked at. */
export const typedUnit = typed.max(60).nullable().catch('');

/** Units that a quantity's readouts may stand in, and what is to be said of a typed one. */
export interface QuantityUnits {
	choices: UnitChoice[];
	typed?: UnitChoice | string;
}
