import { fitPolynomial, type Fit } from './curves/fit';
import { backwards, forwards, type Axis, type CurveFunction } from './curve-function';
import { normal } from './doubt/distributions/normal';
import { student } from './doubt/distributions/student';
import { sentence } from './functions/answered';
import type { Input } from './inputs';
import { parseLine, parseUnit } from './language/parse-line';
import { ofLiteral } from './literal-type';
import type { NoteLine } from './note-lines';
import type { Column, CurveCell, ReadingsCell } from './results';
import { isRefusal, type Refusal } from './tables/refusal';
import { Trouble } from './trouble';
import { pure, type Type } from './types';
import { product, toSI, type Unit } from './units/unit';
import { list, type Value } from './values';

/** What a line of a cell without formulas stands for. */
export type Given =
	| { kind: 'column'; column: Column; cell: ReadingsCell }
	| { kind: 'curve'; cell: CurveCell; inverse: boolean };

/** The lines of a readings cell, one for each column, or of a curve, which defines a function and its inverse. */
export function givenLines(cell: ReadingsCell | CurveCell, terminal: number): NoteLine[] {
	const place = { cell: cell.id, terminal, requirement: false };
	if (cell.kind === 'readings')
		return cell.columns.map((column, i) => ({
			...named(column.name, 'definition'),
			...place,
			line: i + 1,
			text: column.name,
			given: { kind: 'column', column, cell },
		}));
	return [false, true].map((inverse) => {
		const name = inverse ? `${cell.name}_inverse` : cell.name;
		const columns = [cell.x, cell.y].flatMap((typed) => parseLine(typed).references);
		return {
			...named(name, 'function'),
			...place,
			line: 1,
			text: cell.name,
			references: columns,
			given: { kind: 'curve', cell, inverse },
		};
	});
}

/** A line that defines a name as if it were typed; a text that is no name is its trouble. */
function named(typed: string, kind: 'definition' | 'function') {
	const parsed = parseLine(`${typed} = 0`);
	const { defined } = parsed;
	const whole = { from: 0, to: typed.length };
	const base = {
		height: 0,
		quick: false,
		parameters: [],
		references: [],
		unitsBehindNumbers: [],
		kind,
	};
	if (parsed.kind === 'definition' && defined && defined.typed === typed)
		return { ...base, defined };
	return {
		...base,
		trouble: new Trouble('syntax', whole, `\`${typed}\` cannot be a name.`, {
			mend: 'Use letters, digits and underscores, a letter first: `V_ref`.',
		}),
	};
}

/** The values of a column. Throws Trouble. */
export function columnValue({ column, cell }: Extract<Given, { kind: 'column' }>): {
	type: Type;
	value: Value;
} {
	const at = { from: 0, to: column.name.length };
	const { name, values, uncertainties } = column;
	const unit = unitOfColumn(column);
	const first = cell.columns[0] ?? column;
	if (values.length === 0) throw new Trouble('value', at, `\`${name}\` has no readings.`);
	if (values.length !== first.values.length)
		throw new Trouble(
			'value',
			at,
			`\`${name}\` has ${count(values.length)}, \`${first.name}\` has ${first.values.length}.`,
			{ mend: 'Give every column of a cell the same number of readings.' },
		);
	if (uncertainties && uncertainties.length !== values.length)
		throw new Trouble(
			'value',
			at,
			`\`${name}\` has ${count(values.length)} and ${uncertainties.length} uncertainties.`,
		);
	const wrong = values.findIndex((value) => !Number.isFinite(value));
	if (wrong >= 0)
		throw new Trouble('value', at, `Reading ${wrong + 1} of \`${name}\` is not a finite number.`);
	const row = uncertainties?.findIndex((value) => !(value > 0 && Number.isFinite(value))) ?? -1;
	if (row >= 0)
		throw new Trouble(
			'value',
			at,
			`Reading ${row + 1} of \`${name}\` has an uncertainty that is not above zero.`,
		);
	const data = Float64Array.from(values, (value) => toSI(value, unit));
	return { type: ofUnit(unit), value: list(data) };
}

function count(readings: number): string {
	return readings === 1 ? '1 reading' : `${readings} readings`;
}

/** Unit of a column; '1' and '' are pure numbers. Throws Trouble. */
function unitOfColumn({ name, unit }: Column): Unit {
	if (unit.trim() === '' || unit.trim() === '1') return product([]);
	try {
		return parseUnit(unit);
	} catch (error) {
		if (!(error instanceof Trouble)) throw error;
		const at = { from: 0, to: name.length };
		throw new Trouble('unknownName', at, `\`${unit}\`, the unit of \`${name}\`, is not a unit.`);
	}
}

function ofUnit(unit: Unit): Type {
	return unit.parts.length === 0 ? pure : ofLiteral(unit);
}

/** A curve that was fitted: its functions, and the deviations that it may have. */
export interface Fitted {
	fit: Fit;
	x: Axis;
	y: Axis;
	functions: { forwards: CurveFunction; backwards: CurveFunction };
	inputs: Input[];
}

/** Fits a curve cell through two columns. Throws Trouble. */
export function fitCurve(cell: CurveCell, columns: { x: Column; y: Column }): Fitted {
	const uncertainties = cell.weighted ? columns.y.uncertainties : undefined;
	const at = { from: 0, to: cell.name.length };
	if (cell.weighted && !uncertainties)
		throw new Trouble(
			'value',
			at,
			`\`${columns.y.name}\` has no uncertainties to weigh its readings by.`,
			{
				mend: 'Give them, or fit without weights.',
			},
		);
	const fit = fitPolynomial(
		{ x: columns.x.values, y: columns.y.values, ...(uncertainties && { uncertainties }) },
		{ degree: cell.degree },
	);
	if (isRefusal(fit)) throw refused(fit, cell);
	const axis = (column: Column): Axis => {
		const unit = unitOfColumn(column);
		return { unit, type: ofUnit(unit) };
	};
	const [x, y] = [axis(columns.x), axis(columns.y)];
	return {
		fit,
		x,
		y,
		functions: {
			forwards: forwards(cell.name, fit, x, y),
			backwards: backwards(`${cell.name}_inverse`, fit, x, y),
		},
		inputs: deviations(cell.name, fit),
	};
}

function refused(refusal: Refusal, cell: CurveCell): Trouble {
	const at = { from: 0, to: cell.name.length };
	const names = { x: cell.x, y: cell.y };
	const how = refusal.mend === undefined ? {} : { mend: refusal.mend };
	return new Trouble('value', at, sentence(refusal, names), how);
}

/** Independent deviations of standard uncertainty 1, one for each coefficient. */
function deviations(name: string, fit: Fit): Input[] {
	const dof = fit.uncertaintyDegreesOfFreedom;
	const distribution = Number.isFinite(dof) ? student(1, dof) : normal(1);
	// A fit through its very points with no degree of freedom says nothing of its scatter.
	if ('fault' in distribution) return [];
	const parts = fit.scaled.factor.length;
	return Array.from({ length: parts }, (_, i) => ({
		distribution,
		value: 0,
		type: pure,
		label: `${name}, part ${i + 1}`,
	}));
}
