/** A row of a note's log without its bytes. */
export interface LogRow {
	seq: number;
	/** First sequence number of what it holds: its own, or that of its folded stretch. */
	start: number;
	firstAt: Date;
	at: Date;
	personId: string;
	folded: boolean;
}

/** Rows that lie one behind the other and are folded together. */
export interface Stretch {
	first: number;
	last: number;
	rows: LogRow[];
}

/** How rows are cut into stretches: the longest time one spans, and the longest pause inside. */
export interface Grain {
	spanMs: number;
	pauseMs: number;
}

const minute = 60_000;
const hour = 60 * minute;
const day = 24 * hour;

/** A pause in the work after which a new session of work begins. */
export const sessionPauseMs = 10 * minute;

/** From fine to coarse: what a note's history is kept in while it is young, and the older its parts grow. */
export const grains: readonly [Grain, ...Grain[]] = [
	{ spanMs: 10 * minute, pauseMs: sessionPauseMs },
	{ spanMs: hour, pauseMs: sessionPauseMs },
	{ spanMs: day, pauseMs: 4 * hour },
	{ spanMs: 30 * day, pauseMs: 30 * day },
	{ spanMs: 3650 * day, pauseMs: 3650 * day },
];

/**
 * Cuts rows, in the order of their numbers, into stretches. None crosses one of the boundaries (numbers at which a
 * stretch must end), and what was folded together stays together.
 */
export function stretchesOf(
	rows: readonly LogRow[],
	grain: Grain,
	boundaries: ReadonlySet<number>,
): Stretch[] {
	const stretches: Stretch[] = [];
	for (const unit of unitsOf(rows)) {
		const open = stretches.at(-1);
		if (open && joins(open, unit, grain, boundaries)) {
			open.rows.push(...unit.rows);
			open.last = unit.last;
		} else stretches.push(unit);
	}
	return stretches;
}

/** Rows that were folded together, and single ones. */
function unitsOf(rows: readonly LogRow[]): Stretch[] {
	const units: Stretch[] = [];
	for (const row of rows) {
		const open = units.at(-1);
		if (open?.first === row.start) {
			open.rows.push(row);
			open.last = row.seq;
		} else units.push({ first: row.start, last: row.seq, rows: [row] });
	}
	return units;
}

function joins(open: Stretch, next: Stretch, grain: Grain, boundaries: ReadonlySet<number>) {
	return (
		!boundaries.has(open.last) &&
		next.first === open.last + 1 &&
		// A clock that was set back makes a new stretch as well.
		Math.abs(endOf(next) - startOf(open)) <= grain.spanMs &&
		Math.abs(startOf(next) - endOf(open)) <= grain.pauseMs
	);
}

const startOf = ({ rows }: Stretch) => Math.min(...rows.map(({ firstAt }) => firstAt.getTime()));
const endOf = ({ rows }: Stretch) => Math.max(...rows.map(({ at }) => at.getTime()));
