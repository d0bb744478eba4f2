import type { Evaluation } from '$lib/calc/results';

/** Where a person writes. */
interface Place {
	cellId: string;
	/** 1-based. */
	line: number;
}

/** Most verdicts told at once; how many more there are is said. */
const most = 3;

/**
 * What to tell of new figures to a person who hears the page: the line they write in, as far as it changed, and
 * verdicts that turned. Empty where that is nothing.
 */
export function figureNews(before: Evaluation, now: Evaluation, at: Place | undefined): string {
	const line = at && lineText(now, at);
	const told = line !== undefined && line !== lineText(before, at!) ? [line] : [];
	const known = new Map(before.requirements.map((each) => [keyOf(each), each.verdict]));
	const turned = now.requirements.filter((each) => {
		const verdict = known.get(keyOf(each));
		return verdict !== undefined && verdict !== each.verdict && !isAt(each, at);
	});
	told.push(
		...turned.slice(0, most).map(({ text, valueText }) => `Requirement on ${valueText}: ${text}.`),
	);
	if (turned.length > most) told.push(`${turned.length - most} more verdicts turned.`);
	return told.join(' ');
}

function lineText(evaluation: Evaluation, at: Place): string | undefined {
	const fault = evaluation.errors.find((each) => isAt(each, at));
	if (fault) return `Error: ${fault.message}`;
	const requirement = evaluation.requirements.find((each) => isAt(each, at));
	if (requirement) return `${requirement.text}.`;
	const worked = evaluation.lines.find((each) => isAt(each, at));
	if (!worked?.readout) return undefined;
	const { number, doubt, unit } = worked.readout;
	const figure = [number, doubt && `± ${doubt}`, unit].filter(Boolean).join(' ');
	return worked.name === undefined ? `${figure}.` : `${worked.name}: ${figure}.`;
}

function isAt({ cell, line }: { cell: string; line: number }, at: Place | undefined): boolean {
	return at !== undefined && cell === at.cellId && line === at.line;
}

function keyOf({ cell, line }: { cell: string; line: number }): string {
	return `${cell} ${line}`;
}
