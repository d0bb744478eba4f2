import type { Requirement } from '$lib/calc/results';
import type { RequirementChange } from '$lib/schemas/comparison';
import { align, pairs } from './alignment';
import { isSame } from './amounts';
import { partsOf } from './words';
import { codeOf, spelled, type Material } from './written';

interface Line {
	cell: string;
	line: number;
	code: string;
	spelled: string;
	/** Absent where it has an error. */
	judged: Requirement | undefined;
}

/**
 * Requirements that are not the same on both sides, those whose verdict turned first. A requirement is the same one
 * where it stands in the same cell in its place, or anywhere else in the same words.
 */
export function requirementChanges(
	from: Material,
	to: Material,
	renamed: ReadonlyMap<string, string>,
): RequirementChange[] {
	const [before, after] = [linesOf(from, renamed), linesOf(to)];
	const twins = matched(before, after);
	const changes = twins.flatMap(([old, now]) => changeOf(old, now) ?? []);
	return [...changes.filter(({ turned }) => turned), ...changes.filter(({ turned }) => !turned)];
}

function linesOf({ content, results }: Material, renamed?: ReadonlyMap<string, string>): Line[] {
	const judged = new Map(results.requirements.map((one) => [`${one.cell} ${one.line}`, one]));
	return content.cells
		.filter(({ kind }) => kind === 'requirement')
		.flatMap(({ id: cell, source }) =>
			source.split('\n').map((text, index): Line => {
				const code = codeOf(text);
				const line = index + 1;
				const own = judged.get(`${cell} ${line}`);
				return { cell, line, code, spelled: spelled(code, renamed), judged: own };
			}),
		)
		.filter(({ code }) => code !== '');
}

function matched(before: readonly Line[], after: readonly Line[]) {
	const twinOf = new Map<Line, Line>();
	for (const cell of new Set(after.map((line) => line.cell))) {
		const [a, b] = [before, after].map((lines) => lines.filter((line) => line.cell === cell));
		if (!a || !b || a.length === 0) continue;
		const runs = align(
			a.map((line) => line.spelled),
			b.map((line) => line.spelled),
		);
		for (const [i, j] of pairs(runs)) if (a[i] && b[j]) twinOf.set(b[j], a[i]);
	}
	const free = new Set(before);
	for (const old of twinOf.values()) free.delete(old);
	for (const now of after) {
		if (twinOf.has(now)) continue;
		const old = [...free].find((line) => line.spelled === now.spelled);
		if (!old) continue;
		twinOf.set(now, old);
		free.delete(old);
	}
	return [
		...after.map((now): [Line | undefined, Line | undefined] => [twinOf.get(now), now]),
		...[...free].map((old): [Line | undefined, Line | undefined] => [old, undefined]),
	];
}

function changeOf(from: Line | undefined, to: Line | undefined): RequirementChange | undefined {
	const rewritten = from && to && from.spelled !== to.spelled;
	if (from && to && !rewritten && isAlike(from.judged, to.judged)) return undefined;
	return {
		from: from ? shown(from) : null,
		to: to ? shown(to) : null,
		turned: from?.judged?.verdict !== to?.judged?.verdict,
		...(rewritten && { parts: partsOf(from.code, to.code) }),
	};
}

function isAlike(from: Requirement | undefined, to: Requirement | undefined): boolean {
	if (!from || !to) return from === to;
	return (
		from.verdict === to.verdict &&
		(from.unit === to.unit ? isSame(from.margin, to.margin) : from.text === to.text)
	);
}

function shown({ code, cell, line, judged }: Line) {
	return {
		requirement: code,
		verdict: judged?.verdict ?? null,
		text: judged?.text ?? 'cannot be judged: its line has an error',
		place: { cell, line },
	};
}
