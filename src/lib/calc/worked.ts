import { choiceOf, inChosenUnit } from './chosen-unit';
import { isStatement } from './correlated-lines';
import type { Computed, Remembered, Shown } from './memory';
import type { Note } from './note';
import type { NoteLine } from './note-lines';
import type { Options, Quantity, Readout, WorkedLine } from './results';
import { figures } from './show';
import { shown } from './uncertainty';

/** The lines of a note as they are shown. */
export class Worked {
	constructor(
		private readonly note: Note,
		private readonly options: Options,
	) {}

	/** Readout and uncertainty of a line that was computed. */
	shown(remembered: Remembered): Shown {
		const { correlations } = this.note;
		const known = remembered.shown;
		if (known?.correlations === correlations) return known;
		const made = shown(remembered.computed, this.note.doubts, this.options.coverage);
		return (remembered.shown = { correlations, ...made });
	}

	/** The readout of a quantity: as somebody chose that it is set, else as usual. */
	readoutOf(name: string | undefined, remembered: Remembered): Readout {
		const choice = choiceOf(name, this.options);
		if (!choice) return this.shown(remembered).readout;
		const { computed } = remembered;
		const type = inChosenUnit(computed.type, choice);
		const { doubts } = this.note;
		return shown({ ...computed, type }, doubts, this.options.coverage, choice.digits).readout;
	}

	/** Readout of a computed value in a unit of its own choice. */
	inUnit(computed: Computed): Readout {
		return shown(computed, this.note.doubts, this.options.coverage).readout;
	}

	quantities(): Record<string, Quantity> {
		const all: Record<string, Quantity> = {};
		for (const line of this.note.lines) {
			const remembered = this.note.remembered.get(line);
			if (!line.defined || line.kind !== 'definition' || !remembered || line.requirement) continue;
			const { typed } = line.defined;
			const quantity = this.#quantity(line, remembered);
			const readout = this.readoutOf(typed, remembered);
			all[typed] =
				readout === quantity.readout ? quantity : { ...quantity, text: readout.text, readout };
		}
		return all;
	}

	lines(): WorkedLine[] {
		return this.note.lines
			.filter((line) => !line.requirement && !line.given)
			.map((line) => {
				const made = this.#line(line);
				const remembered = this.note.remembered.get(line);
				if (!made.readout || !remembered) return made;
				const readout = this.readoutOf(made.name, remembered);
				return readout === made.readout ? made : { ...made, readout };
			});
	}

	#quantity(line: NoteLine, remembered: Remembered): Quantity {
		const shown = this.shown(remembered);
		const dependsOn = line.references.map(
			({ name, typed }) => this.note.definition(name)?.defined?.typed ?? typed,
		);
		const known = shown.quantity;
		const same =
			known?.cell === line.cell &&
			known.line === line.line &&
			known.description === line.description &&
			known.dependsOn.every((name, i) => name === dependsOn[i]);
		if (same) return known;
		const { computed } = remembered;
		return (shown.quantity = {
			cell: line.cell,
			line: line.line,
			...figures(computed.value, computed.type),
			text: shown.readout.text,
			readout: shown.readout,
			...(line.description !== undefined && { description: line.description }),
			dependsOn,
			...shown.fields,
		});
	}

	#line(line: NoteLine): WorkedLine {
		const remembered = this.note.remembered.get(line);
		// What states a correlation has nothing to show.
		const shown = remembered && !isStatement(line) ? this.shown(remembered) : undefined;
		const known = shown?.line;
		const name = line.defined?.typed;
		if (known?.cell === line.cell && known.line === line.line && known.name === name) return known;
		const made: WorkedLine = {
			cell: line.cell,
			line: line.line,
			kind: line.kind,
			...(name !== undefined && { name }),
			...(shown && { readout: shown.readout }),
		};
		if (shown) shown.line = made;
		return made;
	}
}
