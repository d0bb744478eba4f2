import { bounds } from '../bounds';
import { alike } from '../memory';
import type { Note } from '../note';
import { faultOf, type NoteLine, type Watch } from '../note-lines';
import type { Cell, Fault, Options, Sweep } from '../results';
import { Trouble } from '../trouble';
import { drawSweep, planOf, type Left, type Plan, type SweepPlace } from './draw';

/** What was drawn, and all that it was computed from. */
interface Known {
	uses: readonly unknown[];
	spent: number;
	drawn: Sweep;
}

/** The curve cells of a note: what an edit does not touch is not drawn again. */
export class Sweeps {
	#known = new Map<string, Known>();

	draw(
		cells: readonly Cell[],
		readable: ReadonlySet<string>,
		note: Note,
		options: Options,
		watch: Watch,
	): { sweeps: Sweep[]; faults: Fault[] } {
		const earlier = this.#known;
		this.#known = new Map();
		const left: Left = { steps: bounds.sweepSteps };
		const sweeps: Sweep[] = [];
		const faults: Fault[] = [];
		for (const cell of cells) {
			if (cell.kind !== 'curve' || !('source' in cell) || !readable.has(cell.id)) continue;
			const [place, ...others] = placesIn(cell.id, cell.source);
			for (const other of others) faults.push(faultOf(other, secondLine(other.text)));
			if (!place) continue;
			try {
				const known = this.#draw(place, earlier, note, options, left, watch);
				this.#known.set(place.cell, known);
				sweeps.push(known.drawn);
			} catch (error) {
				if (!(error instanceof Trouble)) throw error;
				faults.push(faultOf(place, error));
			}
		}
		return { sweeps, faults };
	}

	#draw(
		place: SweepPlace,
		earlier: ReadonlyMap<string, Known>,
		note: Note,
		options: Options,
		left: Left,
		watch: Watch,
	): Known {
		refuseSkipped(place, watch);
		const plan = planOf(place.text, note);
		const uses = usesOf(place, plan, note, options);
		const known = earlier.get(place.cell);
		if (known && alike(known.uses, uses) && left.steps >= known.spent) {
			left.steps -= known.spent;
			return known;
		}
		watch.at?.(place.cell, place.line);
		const before = left.steps;
		const drawn = drawSweep(place, plan, note, options, left);
		return { uses, spent: before - left.steps, drawn };
	}
}

/** All that a curve is computed from: the formulas of its lines and what they stand on. */
function usesOf(
	{ text, line }: SweepPlace,
	{ lines, x, quantities }: Plan,
	note: Note,
	{ normalInterval }: Options,
): unknown[] {
	const ofLine = (one: NoteLine) => [
		one.body ?? one.curve ?? note.computed.get(one),
		...(one.requirement ? [one.cell, one.line] : []),
	];
	const shown = quantities.map(({ name }) => name);
	return [text, line, normalInterval ?? null, ...x, ...shown, ...lines.flatMap(ofLine)];
}

/** The lines of a cell that say something. */
function placesIn(cell: string, source: string): SweepPlace[] {
	return source
		.split('\n')
		.map((text, row) => ({ cell, line: row + 1, text }))
		.filter(({ text }) => text.trim() !== '' && !text.trimStart().startsWith('#'));
}

function secondLine(text: string): Trouble {
	return new Trouble('syntax', { from: 0, to: text.length }, 'A curve cell holds one line.', {
		mend: 'Split the cell here.',
	});
}

function refuseSkipped({ cell, line, text }: SweepPlace, { skip }: Watch): void {
	const skipped = skip?.find((one) => one.cell === cell && one.line === line);
	if (!skipped) return;
	const much = skipped.code === 'tooLong' ? 'took too long to compute' : 'took too much memory';
	throw new Trouble(
		skipped.code,
		{ from: 0, to: text.length },
		`This curve ${much} and was stopped.`,
		{
			mend: 'Ask for fewer points: `in 21 points`.',
		},
	);
}
