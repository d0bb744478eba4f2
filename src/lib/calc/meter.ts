import { bounds } from './bounds';
import type { Place } from './language/nodes';
import { Trouble } from './trouble';

/** Counts operations, so that no line and no note runs for ever. The count alone decides, not the time. */
export class Meter {
	#line = 0;
	#note = 0;

	startLine(): void {
		this.#line = 0;
	}

	/** Operations of the current line. */
	get spent(): number {
		return this.#line;
	}

	/** Operations of the note. */
	get total(): number {
		return this.#note;
	}

	/** Whether the note has so many operations left. */
	affords(steps: number): boolean {
		return this.#note + steps <= bounds.noteSteps;
	}

	/** Counts operations of a line whose result is known. */
	charge(steps: number): void {
		this.#note += steps;
	}

	/** Throws Trouble `tooLong` once the line or the note has used up its operations. */
	spend(steps: number, at: Place): void {
		this.#line += steps;
		this.#note += steps;
		if (this.#line > bounds.lineSteps)
			throw new Trouble(
				'tooLong',
				at,
				`The line needs more than ${grouped(bounds.lineSteps)} operations.`,
				{
					mend: 'Look for a function that calls itself without end, or work on fewer values.',
				},
			);
		if (this.#note > bounds.noteSteps)
			throw new Trouble(
				'tooLong',
				at,
				`The note needs more than ${grouped(bounds.noteSteps)} operations.`,
				{
					mend: 'Split it into several notes, or work on fewer values.',
				},
			);
	}
}

function grouped(count: number): string {
	return String(count).replace(/\B(?=(\d{3})+$)/g, '\u202f');
}
