import type { Correlation } from './doubt/correlations';
import { fitCurve, type Given } from './given-cells';
import type { Inputs } from './inputs';
import { canonical } from './language/characters';
import type { Memory, NumberedCurve } from './memory';
import type { NoteLine } from './note-lines';
import type { Column, CurveCell } from './results';
import { inputStep } from './steps';
import { Trouble } from './trouble';

/** The curves of a note, each fitted once for its function and its inverse. */
export class NoteCurves {
	readonly fitted = new Map<CurveCell, NumberedCurve>();
	/** What the deviations of a fit have to do with each other. */
	readonly pairs: Correlation[] = [];

	constructor(
		private readonly definition: (name: string) => NoteLine | undefined,
		private readonly inputs: Inputs,
		private readonly memory: Memory,
	) {}

	/** Makes a line the function that its curve is, and returns that. Throws Trouble. */
	take(line: NoteLine, { cell, inverse }: Extract<Given, { kind: 'curve' }>): object {
		const { forwards, backwards } = (this.fitted.get(cell) ?? this.#fit(cell)).fitted.functions;
		return (line.curve = inverse ? backwards : forwards);
	}

	/** The columns that a curve goes through. Throws Trouble. */
	columnsOf(cell: CurveCell): { x: Column; y: Column } {
		return { x: this.#column(cell, cell.x), y: this.#column(cell, cell.y) };
	}

	#fit(cell: CurveCell): NumberedCurve {
		const columns = this.columnsOf(cell);
		const firstInput = this.inputs.next;
		const curve = this.memory.curve(JSON.stringify([cell, columns]), firstInput, () => ({
			fitted: fitCurve(cell, columns),
			firstInput,
		}));
		const { inputs, functions } = curve.fitted;
		this.inputs.add(inputs);
		// They rest on one scatter: without correlation, but with its degrees of freedom together.
		for (let i = 1; i < inputs.length; i++)
			this.pairs.push({ first: firstInput, second: firstInput + i, coefficient: 0 });
		if (functions.forwards.deviations.length === 0) {
			const steps = inputs.map((_, i) => inputStep(firstInput + i, this.inputs));
			functions.forwards.deviations = steps;
			functions.backwards.deviations = steps;
		}
		this.fitted.set(cell, curve);
		return curve;
	}

	#column(cell: CurveCell, typed: string): Column {
		const line = this.definition(canonical(typed));
		if (line?.given?.kind === 'column') return line.given.column;
		const at = { from: 0, to: cell.name.length };
		throw new Trouble('value', at, `\`${typed}\` is not a column of readings.`, {
			mend: 'Name two columns of a readings cell.',
		});
	}
}
