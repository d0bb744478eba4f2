/** What a note may hold and do. Counted, never timed, so that the same note meets the same bound everywhere. */
export const bounds = {
	/** Characters of one line. */
	lineLength: 2_000,
	/** Characters of a text in quotes. */
	textLength: 40,
	/** Characters of all cells together. */
	noteLength: 300_000,
	/** Calculation and requirement lines of a note. */
	lines: 5_000,
	/** Brackets, powers, signs and choices inside one another. */
	nesting: 64,
	/** Members of a range or matrix. */
	members: 100_000,
	/** Function calls inside one another. */
	calls: 128,
	/** Levels of formulas that calls inside one another stand on; each takes some of the process's stack. */
	levels: 1_500,
	/** Calls of one line whose units are found, those inside functions included. */
	checkedCalls: 2_000,
	/** Operations of one line, a member of a matrix counting as one. */
	lineSteps: 250_000,
	/** Operations of a note. */
	noteSteps: 1_000_000,
	/** Second derivatives of a note: of each line the square of the number of inputs it depends on. */
	curvatures: 800_000,
	/** Members of a matrix that are handed out with the results. */
	listedMembers: 10_000,
	/** Points of one curve, and quantities in its picture. */
	sweepPoints: 401,
	sweepQuantities: 6,
	/** Operations of all curves of a note, and what looking at one line at one point counts. */
	sweepSteps: 300_000,
	sweepLineSteps: 4,
} as const;
