import type { Differences, FigureChange } from '$lib/schemas/comparison';
import { budgetChanges } from './budgets';
import { cellChanges, textChanges } from './cells';
import { displayChanges } from './displays';
import { expressionChanges, figureChange, formulaChange, isInput, twinsOf } from './figures';
import { renamesOf } from './renames';
import { requirementChanges } from './requirements';
import { sweepChanges } from './sweeps';
import { partsOf } from './words';
import { definitionsOf, spokenIn, type Material } from './written';

/** Everything that differs between two states of a note. Pure: the same states give the same differences. */
export function differences(from: Material, to: Material): Differences {
	const [before, after] = [definitionsOf(from), definitionsOf(to)];
	const renamed = renamesOf(before, after, spokenIn(from.content), spokenIn(to.content));
	const twins = twinsOf(before, after, renamed);
	const inputs: FigureChange[] = [];
	const results: FigureChange[] = [];
	const formulas = twins.flatMap((twin) => {
		const figure = figureChange(twin);
		if (figure) (isInput(twin) ? inputs : results).push(figure);
		// Of an input the figure says what changed; its formula is told where the figure is the same.
		const isTold = figure !== undefined && isInput(twin);
		return isTold ? [] : (formulaChange(twin, renamed, figure !== undefined) ?? []);
	});
	return {
		title:
			from.content.title === to.content.title
				? null
				: partsOf(from.content.title, to.content.title),
		inputs,
		results: [...results, ...expressionChanges(from, to, renamed)],
		formulas,
		renamed: [...renamed].map(([old, name]) => ({ from: old, to: name })),
		budgets: budgetChanges(twins, renamed),
		requirements: requirementChanges(from, to, renamed),
		cells: cellChanges(from.content, to.content),
		texts: textChanges(from.content, to.content),
		displays: displayChanges(from.content, to.content, renamed),
		sweeps: sweepChanges(from.results, to.results),
	};
}
