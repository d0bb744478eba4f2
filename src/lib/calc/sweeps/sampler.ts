import { bounds } from '../bounds';
import { Memory } from '../memory';
import { Note } from '../note';
import type { NoteLine } from '../note-lines';
import { judge } from '../requirements';
import type { Options, Requirement } from '../results';
import { unitOf } from '../show';
import { Bounds } from '../steps';
import type { Trouble } from '../trouble';
import { finiteUncertainty, stepOf } from '../uncertainty';
import { differenceFromSI, fromSI, toSI } from '../units/unit';
import type { SweptInput } from './swept-input';

/** A quantity at one point, in its unit. */
export interface PointValue {
	value: number;
	expandedUncertainty?: number;
	worst?: { lower: number; upper: number };
}

/** What the note says where the input has one value. */
export interface Sample {
	/** In the order of the quantities asked for; undefined where one has no value. */
	values: (PointValue | undefined)[];
	/** In the order of the requirements asked for. */
	judged: (Requirement | undefined)[];
	/** Why a value is missing. */
	trouble?: Trouble | undefined;
}

interface Asked {
	input: SweptInput;
	quantities: readonly NoteLine[];
	requirements: readonly NoteLine[];
	/** All lines that these need. */
	lines: readonly NoteLine[];
	options: Options;
}

/**
 * Computes the part of a note that some quantities need, again and again with other values of one input. What does not
 * depend on the input is computed once.
 */
export class Sampler {
	readonly #memory = new Memory();
	readonly #asked: Asked;
	readonly #lines: readonly NoteLine[];
	/** Operations so far. */
	spent = 0;

	constructor(asked: Asked) {
		this.#asked = asked;
		// What a line of readings or of a fitted curve keeps of its own belongs to one note.
		this.#lines = asked.lines.map((line) => (line.given ? { ...line } : line));
	}

	/** The note with the input at a value in its unit; `worst` asks for worst cases as well. */
	at(x: number, worst = false): Sample {
		const { input, quantities, requirements, options } = this.#asked;
		const body = input.bodyAt(toSI(x, unitOf(input.type)));
		const swept = { ...input.line, body };
		const lines = this.#lines.map((line) => (line === input.line ? swept : line));
		const note = new Note(lines, {}, this.#memory, false);
		this.spent += note.spent + lines.length * bounds.sweepLineSteps;
		const steps = quantities.map((line) => {
			const computed = note.computed.get(line === input.line ? swept : line);
			return { computed, step: computed && stepOf(computed) };
		});
		const doubtful = steps.flatMap(({ step }) => step ?? []);
		const enclosed =
			worst && doubtful.length > 0
				? new Bounds(doubtful, note.inputs, options.normalInterval)
				: undefined;
		const values = steps.map(({ computed, step }): PointValue | undefined => {
			if (!computed || typeof computed.value !== 'number') return undefined;
			const unit = unitOf(computed.type);
			const found = step && finiteUncertainty(step, note.doubts, options.coverage);
			const extremes = step && enclosed?.of(step);
			return {
				value: fromSI(computed.value, unit),
				...(found && { expandedUncertainty: differenceFromSI(found.expandedUncertainty, unit) }),
				...(extremes && {
					worst: { lower: fromSI(extremes.lower, unit), upper: fromSI(extremes.upper, unit) },
				}),
			};
		});
		const judged = requirements.map((line) => judge(line, note, options));
		const failed = lines.find((line) =>
			note.troubles.get(line)?.some(({ code }) => code !== 'waits'),
		);
		return {
			values,
			judged,
			...(failed && { trouble: note.troubles.get(failed)?.find(({ code }) => code !== 'waits') }),
		};
	}
}
