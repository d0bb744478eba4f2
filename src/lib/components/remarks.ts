import type { Evaluation } from '$lib/calc/results';

/** What must be known of a quantity's value beside its uncertainty: sentences. */
export function remarksOf(
	{ quantities }: Evaluation,
	name: string | undefined,
): readonly string[] | undefined {
	if (name === undefined || !Object.hasOwn(quantities, name)) return undefined;
	return quantities[name]?.remarks;
}
