import { isRefusal, type Refusal } from '$lib/calc/tables/refusal';
import type { Worked } from '$lib/calc/tables/worked';
import { expect } from 'vitest';
import type { Expected } from '../curves/digits';

/** Value of an answer that was not refused. */
export function valueOf(answer: Worked | Refusal): number {
	if (isRefusal(answer)) throw new Error(answer.message);
	return answer.value;
}

/** The number within the brackets of a quantity such as `R(-200 degC)`. */
export function argumentOf({ quantity }: Expected): number {
	return Number(/\((-?[\d.]+) /.exec(quantity)?.[1]);
}

/** Expects the printed digits, half a unit of the last one allowed. */
export function expectPrinted(computed: number, { quantity, published }: Expected): void {
	if (published === null) throw new Error(`Nothing is printed for ${quantity}`);
	const decimals = published.split('.')[1]?.length ?? 0;
	const off = Math.abs(computed - Number(published));
	expect(off, `${quantity}: ${computed} beside ${published}`).toBeLessThanOrEqual(
		0.5 * 10 ** -decimals * (1 + 1e-9),
	);
}
