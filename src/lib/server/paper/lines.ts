import { parseLine } from '$lib/calc/language/parse-line';
import type { Evaluation, Readout, Requirement } from '$lib/calc/results';
import { formulaTex } from '$lib/calc/tex';
import { symbolTex } from '$lib/calc/tex-words';
import { gaugeScale, type GaugeScale } from '$lib/components/gauge';
import { splitLine } from '$lib/components/lines';
import { likelihood } from '$lib/components/probability';
import type { NoteCell } from '$lib/note/document';
import { formulaOf, type Formula } from './formula';
import { visible } from './glyphs';

/** A formula with its text as it was typed, which also stands for it where it cannot be set. */
export interface Written {
	formula: Formula | null;
	typed: string;
	/** Whether it stands above and below its line. */
	tall: boolean;
}

/** A formula in TeX beside what was typed. */
export function written(tex: string | undefined, typed: string, ownLine = false): Written {
	const formula = (tex !== undefined && formulaOf(tex, ownLine)) || null;
	return { formula, typed: visible(typed), tall: /\\(frac|begin)\b/.test(tex ?? '') };
}

export interface ShownReadout {
	number: string;
	doubt: string;
	unit: string;
}

/** One line of a calculation. */
export interface Worked {
	/** What is defined, with a function's parameters; null for a bare expression. */
	symbol: Written | null;
	/** null for a line of nothing but a comment, or of nothing. */
	body: Written | null;
	comment: string;
	readout: ShownReadout | null;
	/** What must be known of it, and what is wrong with it: sentences. */
	remarks: string[];
	faults: string[];
}

/** One requirement with its verdict; without one where it could not be judged. */
export interface Judged {
	body: Written | null;
	comment: string;
	verdict: Requirement['verdict'] | null;
	text: string;
	likelihood: string;
	gauge:
		(GaugeScale & { valueText: string; lowerText: string; upperText: string; alt: string }) | null;
	faults: string[];
}

/** The lines of a calculation cell. */
export function workedLines(cell: NoteCell, evaluation: Evaluation): Worked[] {
	const results = new Map(
		evaluation.lines.filter((line) => line.cell === cell.id).map((line) => [line.line, line]),
	);
	return cell.source.split('\n').map((text, index) => {
		const result = results.get(index + 1);
		const { name } = splitLine(text);
		const remarks =
			result?.name !== undefined && Object.hasOwn(evaluation.quantities, result.name)
				? (evaluation.quantities[result.name]?.remarks ?? [])
				: [];
		return {
			symbol: name === undefined ? null : symbolOf(text, name),
			...partsOf(text),
			readout: result?.readout ? shown(result.readout) : null,
			remarks: remarks.map(visible),
			faults: faultsOf(cell, index + 1, evaluation),
		};
	});
}

/** The lines of a requirement cell. */
export function judgedLines(cell: NoteCell, evaluation: Evaluation): Judged[] {
	const results = new Map(
		evaluation.requirements.filter((one) => one.cell === cell.id).map((one) => [one.line, one]),
	);
	return cell.source.split('\n').map((text, index) => {
		const found = results.get(index + 1);
		return {
			...partsOf(text),
			verdict: found?.verdict ?? null,
			text: visible(found?.text ?? ''),
			likelihood: visible((found && likelihood(found)) ?? ''),
			gauge: found ? gaugeOf(found) : null,
			faults: faultsOf(cell, index + 1, evaluation),
		};
	});
}

/** The symbol of a name. */
export function setSymbol(name: string): Written {
	return written(symbolTex(name), name);
}

export function shown({ number, doubt = '', unit }: Readout): ShownReadout {
	return { number: visible(number), doubt: visible(doubt), unit: visible(unit) };
}

function symbolOf(text: string, name: string): Written {
	const { parameters } = parseLine(text);
	const names = parameters.map(({ typed }) => typed);
	const behind = names.length === 0 ? '' : `(${names.join(', ')})`;
	const tex = names.length === 0 ? '' : `\\left(${names.map(symbolTex).join(',\\, ')}\\right)`;
	return written(symbolTex(name) + tex, name + behind);
}

function partsOf(text: string): { body: Written | null; comment: string } {
	const { formulaFrom, formulaTo, commentFrom } = splitLine(text);
	const typed = text.slice(formulaFrom, formulaTo);
	const { body } = parseLine(text);
	return {
		body: typed.trim() === '' ? null : written(body && formulaTex(body), typed),
		comment: visible(text.slice(commentFrom + 1).trim()),
	};
}

function faultsOf(cell: NoteCell, line: number, { errors }: Evaluation): string[] {
	return errors
		.filter((fault) => fault.cell === cell.id && fault.line === line)
		.map(({ message }) => visible(message));
}

function gaugeOf(requirement: Requirement): Judged['gauge'] {
	const { valueText, lowerText, upperText, verdict } = requirement;
	const limits = [
		lowerText === null ? [] : [`lower limit ${lowerText}`],
		upperText === null ? [] : [`upper limit ${upperText}`],
	].flat();
	return {
		...gaugeScale(requirement),
		valueText: visible(valueText),
		lowerText: visible(lowerText ?? ''),
		upperText: visible(upperText ?? ''),
		alt: visible(`Value ${valueText}, ${limits.join(', ')}: ${verdict}`),
	};
}
