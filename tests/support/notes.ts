import { defaultOptions, evaluate } from '$lib/calc/evaluate';
import type { Cell, Evaluation, Fault } from '$lib/calc/results';

/** A calculation cell. */
export function calculation(source: string, id = 'calc'): Cell {
	return { id, kind: 'calculation', source };
}

/** A requirement cell. */
export function requirement(source: string, id = 'req'): Cell {
	return { id, kind: 'requirement', source };
}

/** A text cell. */
export function text(source: string, id = 'text'): Cell {
	return { id, kind: 'text', source };
}

/** Evaluates cells; a plain text stands for one calculation cell. */
export function compute(...cells: (Cell | string)[]): Evaluation {
	const all = cells.map((cell, i) =>
		typeof cell === 'string' ? calculation(cell, `c${i}`) : cell,
	);
	return evaluate(all, defaultOptions);
}

/** Readout of the last line of a calculation, with ordinary spaces; its fault's code where it has none. */
export function shown(source: string): string {
	const { lines, errors } = compute(source);
	const last = lines.at(-1);
	const fault = errors.find((error) => error.line === last?.line);
	return spaced(last?.readout?.text ?? fault?.code ?? '');
}

/** The only fault of a calculation. Throws where there are none or several. */
export function onlyFault(...cells: (Cell | string)[]): Fault {
	const { errors } = compute(...cells);
	const [fault] = errors;
	if (!fault || errors.length > 1)
		throw new Error(`Expected one fault, found ${JSON.stringify(errors)}`);
	return fault;
}

/** Text with its no-break spaces made ordinary. */
export function spaced(value: string): string {
	return value.replace(/[\u00a0\u202f]/g, ' ');
}
