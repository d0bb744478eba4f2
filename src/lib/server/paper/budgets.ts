import type { Evaluation, Quantity } from '$lib/calc/results';
import {
	count,
	degreesOfFreedom,
	distribution,
	factor,
	percent,
} from '$lib/components/doubt-words';
import { visible } from './glyphs';
import { setSymbol, shown, written, type Written, type ShownReadout } from './lines';

/** What stands behind a quantity in doubt: its formula, budget, bounds and trials. */
export interface Budget {
	symbol: Written;
	formula: Written | null;
	readout: ShownReadout;
	/** Pairs of a label and what it says. */
	facts: [string, string][];
	/** Whether any input has finite degrees of freedom. */
	hasDegrees: boolean;
	rows: {
		input: Written;
		value: string;
		distribution: string;
		uncertainty: string;
		degrees: string;
		sensitivity: string;
		contribution: string;
		share: string;
		/** 0 to 1, of the bar. */
		bar: number;
	}[];
	total: string;
}

/** The budgets that a revision keeps, in the order of the sheet. */
export function budgetsOf({ quantities }: Evaluation, coverage: number): Budget[] {
	return Object.entries(quantities).flatMap(([name, quantity]) =>
		quantity.budget && quantity.budget.length > 0 ? [budgetOf(name, quantity, coverage)] : [],
	);
}

function budgetOf(name: string, quantity: Quantity, coverage: number): Budget {
	const { formula, budget = [], texts } = quantity;
	return {
		symbol: setSymbol(name),
		formula: formula ? written(formula.symbols, formula.symbols, true) : null,
		readout: shown(quantity.readout),
		facts: factsOf(quantity, coverage).map(([label, text]) => [label, visible(text)]),
		hasDegrees: budget.some((row) => row.degreesOfFreedom !== null),
		rows: budget.map((row) => ({
			input: setSymbol(row.input),
			value: visible(row.texts.value),
			distribution: distribution(row.distribution),
			uncertainty: visible(row.texts.standardUncertainty),
			degrees: visible(degreesOfFreedom(row.degreesOfFreedom)),
			sensitivity: visible(row.texts.sensitivity),
			contribution: visible(row.texts.contribution),
			share: visible(percent(row.share)),
			bar: Math.min(1, Math.max(0, row.share)),
		})),
		total: visible(texts?.standardUncertainty ?? ''),
	};
}

function factsOf(quantity: Quantity, coverage: number): [string, string][] {
	const { coverageFactor, worstCase, monteCarlo, degreesOfFreedom: dof, remarks = [] } = quantity;
	const facts: [string, string][] = [];
	if (coverageFactor !== undefined)
		facts.push([
			'Expanded uncertainty',
			`k = ${factor(coverageFactor)} for ${percent(coverage)}${dof === undefined || dof === null ? '' : `, ${degreesOfFreedom(dof)} degrees of freedom`}`,
		]);
	if (worstCase)
		facts.push([
			'Worst case',
			`${worstCase.text} (${worstCase.exact ? 'proved' : 'searched; it may lie a little wider'})`,
		]);
	if (monteCarlo) {
		const { trials, seed, texts, validated } = monteCarlo;
		const verdict =
			validated === null
				? ''
				: validated
					? '; validates the interval to first order'
					: '; does not validate the interval to first order, use this one';
		facts.push([
			'Monte Carlo',
			`shortest interval ${texts.shortest}, u = ${texts.standardUncertainty} (${count(trials)} trials, seed ${seed})${verdict}`,
		]);
	}
	for (const remark of remarks) facts.push(['Remark', remark]);
	return facts;
}
