import { choiceOf, inChosenUnit } from './chosen-unit';
import { curveResults } from './curve-results';
import { budgetRows, short, trialsOf, worstCaseOf } from './details';
import { engineVersion } from './engine';
import { readFigures } from './figures';
import { addFormulas } from './formulas';
import { Memory } from './memory';
import { Note } from './note';
import { faultOf, readLines, type Watch } from './note-lines';
import { judge } from './requirements';
import type { Cell, CurveCell, Evaluation, Fault, Options, Quantity } from './results';
import { Bounds } from './steps';
import { Sweeps } from './sweeps/sweeps';
import type { Type } from './types';
import { finiteUncertainty, stepOf } from './uncertainty';
import { Worked } from './worked';

/**
 * Computes a note again and again: what an edit does not touch is taken from the evaluation before, down to the same
 * objects in the results. The results are those of a first evaluation.
 */
export class Calculator {
	#memory = new Memory();
	#sweeps = new Sweeps();
	#options = '';

	/** No input makes it throw. `watch` is for the process around it that must be able to end it. */
	evaluate(cells: readonly Cell[], options: Options, watch: Watch = {}): Evaluation {
		const { coverage, decisionRule } = options;
		const settings = JSON.stringify([coverage, decisionRule]);
		if (settings !== this.#options) {
			this.#memory = new Memory();
			this.#sweeps = new Sweeps();
		}
		this.#options = settings;
		const { lines, readable, faults } = readLines(cells, watch);
		const note = new Note(lines, watch, this.#memory);
		const worked = new Worked(note, options);
		const requirements = lines.flatMap((line) => judge(line, note, options) ?? []);
		const quoted = readFigures(cells, readable, note, worked);
		const drawn = this.#sweeps.draw(cells, readable, note, options, watch);
		const errors = [
			...faults,
			...lines.flatMap((line) => note.faultsOf(line).map((trouble) => faultOf(line, trouble))),
			...quoted.faults,
			...drawn.faults,
		];
		const quantities = worked.quantities();
		addDetails(quantities, note, options, watch);
		const compare =
			options.detail === 'all' ? (cell: CurveCell) => note.curves.columnsOf(cell) : undefined;
		const curves = curveResults(note.curves.fitted, compare);
		return {
			engine: engineVersion,
			quantities,
			lines: worked.lines(),
			requirements,
			figures: quoted.figures,
			...(note.curves.fitted.size > 0 && { curves }),
			...(drawn.sweeps.length > 0 && { sweeps: drawn.sweeps }),
			errors: inSheetOrder(errors, cells),
		};
	}
}

/** Adds budgets, worst cases and trials to the quantities that they are asked of. */
function addDetails(
	quantities: Record<string, Quantity>,
	note: Note,
	options: Options,
	watch: Watch,
): void {
	const { detail = [], monteCarlo } = options;
	const names = detail === 'all' ? Object.keys(quantities) : detail;
	addFormulas(quantities, names, note);
	const wanted = names.flatMap((name) => {
		const computed = note.find(name);
		const step = computed && stepOf(computed);
		const quantity = Object.hasOwn(quantities, name) ? quantities[name] : undefined;
		return step && quantity ? [{ name, computed, step, quantity }] : [];
	});
	const steps = wanted.map(({ step }) => step);
	const bounds = new Bounds(steps, note.inputs, options.normalInterval);
	const set = (name: string, type: Type) => inChosenUnit(type, choiceOf(name, options));
	for (const { name, computed, step, quantity } of wanted) {
		const { type } = computed;
		const setType = set(name, type);
		watch.at?.(quantity.cell, quantity.line);
		const found = finiteUncertainty(step, note.doubts, options.coverage);
		quantities[name] = {
			...quantity,
			worstCase: worstCaseOf(step, type, bounds, setType),
			budget: budgetRows(step, type, note.inputs.all, note.doubts, set, setType),
			...(found && {
				texts: { standardUncertainty: short(found.standardUncertainty, setType) },
			}),
		};
	}
	if (!monteCarlo) return;
	const trials = trialsOf(note, options, monteCarlo, watch);
	for (const name of monteCarlo.quantities) {
		const computed = note.find(name);
		const quantity = Object.hasOwn(quantities, name) ? quantities[name] : undefined;
		const found = computed && trials.get(computed);
		if (found && quantity) quantities[name] = { ...quantity, monteCarlo: found };
	}
}

function inSheetOrder(errors: Fault[], cells: readonly Cell[]): Fault[] {
	const place = new Map(cells.map((cell, i) => [cell.id, i]));
	return errors.sort(
		(a, b) =>
			(place.get(a.cell) ?? 0) - (place.get(b.cell) ?? 0) || a.line - b.line || a.from - b.from,
	);
}
