import type { Distribution } from './doubt/distributions/distribution';
import type { Type } from './types';

/** A number in doubt that a line states: `tolerance(100 kohm, 1 %)`. */
export interface Input {
	distribution: Distribution;
	/** Its centre, in SI units. */
	value: number;
	type: Type;
	/** Name of the quantity that states it, with a number behind it where that states several, or the text of the call. */
	label: string;
}

/** All inputs of a note, numbered in the order in which its lines are computed. */
export class Inputs {
	readonly all: Input[] = [];
	readonly uncertainties: number[] = [];
	readonly dofs: number[] = [];

	/** The number that the next input gets. */
	get next(): number {
		return this.all.length;
	}

	/** These inputs and some more, which stay no part of them. */
	with(more: readonly Input[]): Inputs {
		if (more.length === 0) return this;
		const extended = new Inputs();
		extended.add(this.all);
		extended.add(more);
		return extended;
	}

	/** Numbers the inputs of a line; returns the first number. */
	add(inputs: readonly Input[]): number {
		const first = this.next;
		for (const input of inputs) {
			this.all.push(input);
			this.uncertainties.push(input.distribution.uncertainty);
			this.dofs.push(input.distribution.dof);
		}
		return first;
	}
}

/** Inputs of one line get numbers where it states several. */
export function labelled(inputs: readonly Input[]): Input[] {
	const counts = new Map<string, number>();
	return inputs.map((input) => {
		const count = (counts.get(input.label) ?? 0) + 1;
		counts.set(input.label, count);
		return count === 1 ? input : { ...input, label: `${input.label} (${count})` };
	});
}
