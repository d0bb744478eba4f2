import type { Case, Figure } from '$lib/proof/case';
import { findCase } from '$lib/proof/cases';
import { judge } from '$lib/proof/judge';
import { expect } from 'vitest';

/** A case with figures that the language does not give. */
interface Extended extends Case {
	/** Of propagation with the next order of terms. */
	secondOrder?: Figure[];
	exact?: { u_mg: number; our_MC_symmetric_95: [number, number] };
	exact_symmetric_95_1e6?: [number, number];
	exact_shortest_95_1e6?: [number, number];
}

export function caseOf(id: string): Extended {
	return findCase(id);
}

/** Title of a test: what it is and where it is printed. */
export function titleOf(id: string): string {
	const { title, source, confirmed } = caseOf(id);
	return `${title}: ${source.document}, ${source.locator} (${confirmed ?? 'recomputed'})`;
}

/** Checks a computed figure, in the printed unit, as the proofs do. */
export function check(id: string, quantity: string, computed: number): void {
	const { figures, secondOrder = [] } = caseOf(id);
	const figure = [...figures, ...secondOrder].find((each) => each.quantity === quantity);
	if (!figure) throw new Error(`${id} has no figure ${quantity}`);
	const { agrees, rule } = judge(figure, computed);
	expect(agrees, `${quantity}: ${computed}, printed ${figure.published} (${rule})`).toBe(true);
}
