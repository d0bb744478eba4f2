import { budgetOf, uncertaintyOf, type Doubts } from '$lib/calc/doubt/budget';
import { correlate, type Correlation } from '$lib/calc/doubt/correlations';
import type { Distribution, ParameterFault } from '$lib/calc/doubt/distributions/distribution';
import { halfWidth } from '$lib/calc/doubt/distributions/shapes';
import { enclose, type Enclosure } from '$lib/calc/doubt/enclose';
import type { Model, Step } from '$lib/calc/doubt/model';
import type { Binary, Unary } from '$lib/calc/doubt/operations';
import { propagate, type Propagated } from '$lib/calc/doubt/propagate';
import { TapeBuilder, type Node } from '$lib/calc/doubt/tape';
import { worstCase, type WorstCase } from '$lib/calc/doubt/worst-case';

/** A formula over the arguments of a line: a number, an argument's name, or an operation. */
export type Formula = number | string | [Unary, Formula] | [Binary, Formula, Formula];

/** Narrows what makes a distribution, for inputs that are known to be right. */
function sure<Made extends object>(made: Made | ParameterFault): Made {
	if ('fault' in made) throw new Error(made.message);
	return made;
}

/** Lines of a note for tests: inputs and formulas by name, with everything the engine says of them. */
export class Sheet {
	readonly #steps: Step[] = [];
	readonly #names: string[] = [];
	readonly #inputs: Distribution[] = [];
	readonly #propagated: Propagated[] = [];
	readonly #pairs: Correlation[] = [];

	/** A doubtful input about an estimate. Its number is that of its declaration. */
	input(name: string, estimate: number, distribution: Distribution | ParameterFault): this {
		const tape = new TapeBuilder();
		this.#inputs.push(sure(distribution));
		const node = tape.binary('add', tape.constant(estimate), tape.input(0));
		return this.#add(name, tape, node, [], [this.#inputs.length - 1]);
	}

	line(name: string, formula: Formula): this {
		const tape = new TapeBuilder();
		const used: string[] = [];
		const write = (part: Formula): Node => {
			if (typeof part === 'number') return tape.constant(part);
			if (typeof part === 'string') {
				if (!used.includes(part)) used.push(part);
				return tape.argument(used.indexOf(part));
			}
			if (part.length === 2) return tape.unary(part[0], write(part[1]));
			const x = write(part[1]);
			return tape.binary(part[0], x, write(part[2]));
		};
		const node = write(formula);
		return this.#add(
			name,
			tape,
			node,
			used.map((each) => this.place(each)),
			[],
		);
	}

	/** Correlates two lines that are inputs. */
	correlated(first: string, second: string, coefficient: number): this {
		const number = (name: string) => this.#steps[this.place(name)]!.inputs[0]!;
		this.#pairs.push({ first: number(first), second: number(second), coefficient });
		return this;
	}

	place(name: string): number {
		const place = this.#names.indexOf(name);
		if (place < 0) throw new Error(`No line ${name}`);
		return place;
	}

	get model(): Model {
		const { correlations } = this.doubts;
		return { steps: this.#steps, inputs: this.#inputs, ...(correlations ? { correlations } : {}) };
	}

	get doubts(): Doubts {
		const correlations = correlate(this.#pairs);
		if ('fault' in correlations) throw new Error(correlations.message);
		return {
			uncertainties: this.#inputs.map(({ uncertainty }) => uncertainty),
			dofs: this.#inputs.map(({ dof }) => dof),
			correlations,
		};
	}

	propagated(name: string): Propagated {
		return this.#propagated[this.place(name)]!;
	}

	value(name: string): number {
		return this.propagated(name).value;
	}

	uncertainty(name: string, coverage = 0.95) {
		return uncertaintyOf(this.propagated(name), this.doubts, coverage);
	}

	/** Contribution of an input, in the unit of the line. */
	contribution(name: string, input: string): number {
		const number = this.#steps[this.place(input)]!.inputs[0]!;
		const line = this.propagated(name);
		const { places, contributions } = budgetOf(line, this.doubts);
		return contributions[places.findIndex((place) => line.support[place] === number)]!;
	}

	enclosure(name: string): Enclosure {
		const enclosures: Enclosure[] = [];
		for (const { tape, args, inputs } of this.#steps)
			enclosures.push(
				enclose(
					tape,
					Array.from(args, (arg) => enclosures[arg]!),
					inputs,
					this.#widths,
				),
			);
		return enclosures[this.place(name)]!;
	}

	worst(name: string): WorstCase {
		return worstCase(this.model, this.place(name), this.enclosure(name), this.#widths);
	}

	get #widths(): number[] {
		return this.#inputs.map((input) => halfWidth(input));
	}

	#add(name: string, tape: TapeBuilder, node: Node, args: number[], inputs: number[]): this {
		const step = { tape: tape.finish(node), args, inputs };
		this.#steps.push(step);
		this.#names.push(name);
		this.#propagated.push(
			propagate(
				step.tape,
				args.map((arg) => this.#propagated[arg]!),
				inputs,
				this.#inputs.map(({ uncertainty }) => uncertainty),
			),
		);
		return this;
	}
}
