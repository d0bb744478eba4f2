import type { BudgetRow } from '$lib/calc/results';
import type { BudgetChange, ContributionChange } from '$lib/schemas/comparison';
import type { Twin } from './figures';

/** Shares of the variance that differ by less than this count as the same: they are shown to a tenth of a percent. */
export const shareTolerance = 0.001;

/** What moved in the uncertainty budgets that both sides have. */
export function budgetChanges(
	twins: readonly Twin[],
	renamed: ReadonlyMap<string, string>,
): BudgetChange[] {
	return twins.flatMap(({ from, to }) => {
		const [before, after] = [from?.quantity?.budget, to?.quantity?.budget];
		if (!to || !before || !after) return [];
		const contributions = contributionsOf(before, after, renamed);
		return contributions.length === 0 ? [] : [{ quantity: to.name, contributions }];
	});
}

function contributionsOf(
	before: readonly BudgetRow[],
	after: readonly BudgetRow[],
	renamed: ReadonlyMap<string, string>,
): ContributionChange[] {
	const old = new Map(before.map((row) => [inputName(row.input, renamed), row]));
	const now = new Map(after.map((row) => [row.input, row]));
	const size = (change: ContributionChange) => Math.max(change.fromShare ?? 0, change.toShare ?? 0);
	return [...new Set([...now.keys(), ...old.keys()])]
		.map((input) => ({ input, from: old.get(input), to: now.get(input) }))
		.filter(({ from, to }) => !from || !to || Math.abs(from.share - to.share) >= shareTolerance)
		.map(({ input, from, to }) => ({
			input,
			from: from?.texts.contribution ?? null,
			to: to?.texts.contribution ?? null,
			fromShare: from?.share ?? null,
			toShare: to?.share ?? null,
		}))
		.sort((a, b) => size(b) - size(a) || (a.input < b.input ? -1 : 1));
}

/** `R1 (2)` under the name that R1 has on the later side. */
function inputName(input: string, renamed: ReadonlyMap<string, string>): string {
	const [name = ''] = input.split(' ', 1);
	return (renamed.get(name) ?? name) + input.slice(name.length);
}
