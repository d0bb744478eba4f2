import { needsTrials, uncertaintyOf, type Doubts, type Uncertainty } from './doubt/budget';
import { Remark } from './doubt/remarks';
import type { Computed } from './memory';
import type { Quantity } from './results';
import { show, unitOf } from './show';
import type { Step } from './steps';
import { differenceFromSI } from './units/unit';

/** The step of a single number in doubt; lists, conditions and exact values have none. */
export function stepOf({ doubt, type }: Computed): Step | undefined {
	return doubt && !doubt.shape && type.kind === 'number' ? doubt.steps[0] : undefined;
}

/** A number's uncertainty in SI units; undefined where first order gives no finite one. */
export function finiteUncertainty(
	step: Step,
	doubts: Doubts,
	coverage: number,
): Uncertainty | undefined {
	const uncertainty = uncertaintyOf(step.propagated, doubts, coverage);
	return Number.isFinite(uncertainty.expandedUncertainty) ? uncertainty : undefined;
}

type Fields = Pick<
	Quantity,
	| 'standardUncertainty'
	| 'degreesOfFreedom'
	| 'coverageFactor'
	| 'expandedUncertainty'
	| 'remarks'
	| 'needsMonteCarlo'
>;

/** Readout, to so many digits where somebody chose that, and uncertainty of a computed value, numbers in its unit. */
export function shown(computed: Computed, doubts: Doubts, coverage: number, digits?: number) {
	const { value, type } = computed;
	const step = stepOf(computed);
	if (!step) return { readout: show(value, type, undefined, digits), fields: {} };
	const found = finiteUncertainty(step, doubts, coverage);
	const needed = !found || needsTrials(step.propagated, doubts);
	const remarks = sentences(step, found !== undefined, needed);
	const fields: Fields = {
		...(remarks.length > 0 && { remarks }),
		...(needed && { needsMonteCarlo: true }),
	};
	if (!found) return { readout: show(value, type, undefined, digits), fields };
	const unit = unitOf(type);
	fields.standardUncertainty = differenceFromSI(found.standardUncertainty, unit);
	fields.degreesOfFreedom = Number.isFinite(found.dof) ? found.dof : null;
	fields.coverageFactor = found.coverageFactor;
	fields.expandedUncertainty = differenceFromSI(found.expandedUncertainty, unit);
	const expanded = found.expandedUncertainty > 0 ? found.expandedUncertainty : undefined;
	return { readout: show(value, type, expanded, digits), fields };
}

function sentences({ propagated }: Step, finite: boolean, needed: boolean): string[] {
	const { remarks } = propagated;
	const found: string[] = [];
	if (!finite)
		found.push('First order gives no uncertainty here: the value has no finite slope. Run trials.');
	else if (needed && !propagated.curvature)
		found.push('Second-order terms are not known of so many inputs or lines. Run trials.');
	else if (needed)
		found.push('Second-order terms change the standard uncertainty by more than 1 %. Run trials.');
	if (remarks & Remark.step)
		found.push('A step lies in the way, of which the uncertainty to first order sees nothing.');
	if (remarks & Remark.corner)
		found.push('The value lies at a corner, where it has no single slope.');
	if (remarks & Remark.differences) found.push('Sensitivities are partly taken from differences.');
	return found;
}
