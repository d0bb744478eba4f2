import { bandsOf, grouped } from '$lib/components/seal';
import { day } from '$lib/components/time';
import type { NoteCell } from '$lib/note/document';
import { addressOf } from './address';
import { budgetsOf, type Budget } from './budgets';
import { visible } from './glyphs';
import { judgedLines, workedLines, type Judged, type Worked } from './lines';
import { plotsOf, type PrintedPlot } from './plots';
import { proseOf, type Block } from './prose';
import { recordOf, type ReviewRecord } from './record';
import type { SealedContent } from './sealed-content';

type Cell = { id: string; terminal: number } & (
	| { kind: 'text'; blocks: Block[]; faults: string[] }
	| { kind: 'calculation'; lines: Worked[] }
	| { kind: 'requirement'; lines: Judged[] }
	| { kind: 'curve'; lines: Judged[]; plots: PrintedPlot[] }
);

/** All that the typesetter sets, as data: what people wrote is never part of its program. */
export interface Sheet {
	paper: 'a4' | 'us-letter';
	/** "MN-014 revision B: title" */
	documentTitle: string;
	number: string;
	letter: string;
	title: string;
	/** The title as far as a line of the title block holds it. */
	shortTitle: string;
	team: string;
	purpose: string;
	replaces: { letter: string; reason: string } | null;
	authors: string[];
	/** Year, month, day, hour, minute, second of freezing, UTC. */
	frozenAt: number[];
	frozenDay: string;
	engine: string;
	digest: string;
	/** In groups of eight. */
	groups: string[];
	bands: { digit: number; name: string; shade: string }[];
	/** Where the QR code leads. */
	address: string;
	cautions: string[];
	/** Widths in points of the columns that stand alike down the whole sheet. */
	columns: { symbol: number; readout: number };
	cells: Cell[];
	budgets: Budget[];
	record: ReviewRecord;
}

/** The paper of a sealed revision. Equal files give equal sheets. */
export function sheetOf(
	{ revision, seal }: SealedContent,
	{ paper, origin }: { paper: Sheet['paper']; origin: string },
): Sheet {
	const { proposal, note, letter } = revision;
	const { content, results, engine, cautions } = proposal;
	const digest = seal.statement.contentHash;
	const title = visible(content.title.replace(/\s+/g, ' ').trim()) || 'Untitled';
	const frozen = new Date(revision.frozenAt);
	const cells = content.cells.map((cell, index) => cellOf(cell, index + 1, results));
	return {
		paper,
		documentTitle: `${note.number} revision ${letter}: ${title}`,
		number: note.number,
		letter,
		title,
		shortTitle: title.length > 56 ? `${title.slice(0, 55).trimEnd()}…` : title,
		team: visible(revision.team.name),
		purpose: visible(proposal.purpose),
		replaces: revision.replaces && {
			letter: revision.replaces.letter,
			reason: visible(revision.replaces.reason),
		},
		authors: proposal.authors.map(({ name }) => visible(name)),
		frozenAt: [
			frozen.getUTCFullYear(),
			frozen.getUTCMonth() + 1,
			frozen.getUTCDate(),
			frozen.getUTCHours(),
			frozen.getUTCMinutes(),
			frozen.getUTCSeconds(),
		],
		frozenDay: day(revision.frozenAt),
		engine,
		digest,
		groups: grouped(digest).split(' '),
		bands: bandsOf(digest),
		address: addressOf(digest, origin),
		cautions: [...new Set(cautions.map(({ text }) => visible(text)))],
		columns: columnsOf(cells),
		cells,
		budgets: budgetsOf(results, proposal.options.coverage),
		record: recordOf(revision),
	};
}

/** Points that a letter of a symbol and of a figure takes, about. */
const widths = { symbol: 4.8, figure: 5.5 };

/** Columns as wide as what stands in them, within bounds; what is wider breaks or goes on. */
function columnsOf(cells: readonly Cell[]): Sheet['columns'] {
	const lines = cells.flatMap((cell) => (cell.kind === 'calculation' ? cell.lines : []));
	const symbols = lines.map(({ symbol }) => [...(symbol?.typed ?? '')].length);
	const readouts = lines.map(({ readout }) =>
		readout ? [...readout.number, ...readout.unit, ...readout.doubt].length + 5 : 0,
	);
	const within = (least: number, width: number, most: number) =>
		Math.round(Math.min(most, Math.max(least, width)));
	return {
		symbol: within(44, 14 + widths.symbol * Math.max(0, ...symbols), 110),
		readout: within(70, widths.figure * Math.max(0, ...readouts), 190),
	};
}

function cellOf(
	cell: NoteCell,
	terminal: number,
	results: SealedContent['revision']['proposal']['results'],
): Cell {
	const { id, kind } = cell;
	switch (kind) {
		case 'text': {
			const faults = results.errors
				.filter((fault) => fault.cell === id)
				.map(({ message }) => visible(message));
			return { id, terminal, kind, blocks: proseOf(cell, results), faults };
		}
		case 'calculation':
			return { id, terminal, kind, lines: workedLines(cell, results) };
		case 'requirement':
			return { id, terminal, kind, lines: judgedLines(cell, results) };
		case 'curve':
			return {
				id,
				terminal,
				kind,
				lines: judgedLines(cell, results),
				plots: plotsOf(cell, results),
			};
	}
}
