import { parseUnit } from './language/parse-line';
import type { Evaluation, Fault, Figure, Quantity, Readout, Requirement, Sweep } from './results';
import { same } from './units/dimension';
import { minus } from './units/number-text';
import { readout } from './units/display';
import { one, toSI, type Unit } from './units/unit';

/** A quantity that differs between two evaluations of a note. */
export interface MovedQuantity {
	name: string;
	/** null where it has no value. */
	before: Readout | null;
	after: Readout | null;
	/** With its sign and unit; null where there is no number to subtract, or both are the same number. */
	difference: string | null;
	/** Of the first value; null where that is zero or lies on a scale whose zero is arbitrary. */
	share: number | null;
}

/** A requirement that differs between two evaluations of a note. */
export interface MovedRequirement {
	cell: string;
	/** 1-based. */
	line: number;
	before: Requirement | null;
	after: Requirement | null;
}

/** What differs between two evaluations of a note. What is the same stands nowhere here. */
export interface Moved {
	/** In the order in which the note defines them. */
	quantities: MovedQuantity[];
	requirements: MovedRequirement[];
	/** Quoted figures as they are in the second. */
	figures: Figure[];
	/** Faults that the first does not have. */
	faults: Fault[];
	/** Curves as they are in the second; none of one that has a fault there. */
	sweeps: Sweep[];
}

/** Smaller than this share of a value, a difference is what rounding leaves. */
const rounding = 1e-12;

/** Compares two evaluations of a note whose lines stand at the same places. */
export function movedBetween(first: Evaluation, second: Evaluation): Moved {
	return {
		quantities: quantitiesOf(first, second),
		requirements: requirementsOf(first, second),
		figures: figuresOf(first, second),
		faults: faultsOf(first, second),
		sweeps: sweepsOf(first, second),
	};
}

function quantitiesOf(first: Evaluation, second: Evaluation): MovedQuantity[] {
	const names = new Set([...Object.keys(first.quantities), ...Object.keys(second.quantities)]);
	return [...names].flatMap((name) => {
		const [before, after] = [find(first, name), find(second, name)];
		if (JSON.stringify(seenOf(before)) === JSON.stringify(seenOf(after))) return [];
		return {
			name,
			before: before?.readout ?? null,
			after: after?.readout ?? null,
			...differenceOf(before, after),
		};
	});
}

function find({ quantities }: Evaluation, name: string): Quantity | undefined {
	return Object.hasOwn(quantities, name) ? quantities[name] : undefined;
}

function seenOf(quantity: Quantity | undefined) {
	const { text, unit, value, values, expandedUncertainty } = quantity ?? {};
	return [text, unit, value, values, expandedUncertainty];
}

function differenceOf(
	before: Quantity | undefined,
	after: Quantity | undefined,
): Pick<MovedQuantity, 'difference' | 'share'> {
	const nothing = { difference: null, share: null };
	if (typeof before?.value !== 'number' || typeof after?.value !== 'number') return nothing;
	const [unit, other] = [unitNamed(before.unit), unitNamed(after.unit)];
	if (!same(unit.dimension, other.dimension)) return nothing;
	const [from, to] = [toSI(before.value, unit), toSI(after.value, other)];
	const difference = to - from;
	if (Math.abs(difference) <= rounding * Math.max(Math.abs(from), Math.abs(to))) return nothing;
	const plain = unit.offset === 0 ? unit : unitNamed('K');
	const size = readout(Math.abs(difference), plain, true, 3).text;
	return {
		difference: `${difference < 0 ? minus : '+'}${size}`,
		share: unit.offset !== 0 || from === 0 ? null : difference / Math.abs(from),
	};
}

function unitNamed(text: string): Unit {
	return text === '1' ? one : parseUnit(text);
}

function requirementsOf(first: Evaluation, second: Evaluation): MovedRequirement[] {
	const place = ({ cell, line }: Requirement) => `${cell} ${line}`;
	const [before, after] = [first, second].map(
		({ requirements }) => new Map(requirements.map((one) => [place(one), one])),
	) as [Map<string, Requirement>, Map<string, Requirement>];
	const places = new Set([...before.keys(), ...after.keys()]);
	return [...places].flatMap((at) => {
		const [was, is] = [before.get(at), after.get(at)];
		const some = was ?? is;
		if (!some || JSON.stringify(was) === JSON.stringify(is)) return [];
		return { cell: some.cell, line: some.line, before: was ?? null, after: is ?? null };
	});
}

function figuresOf(first: Evaluation, second: Evaluation): Figure[] {
	const known = new Set(first.figures.map((figure) => JSON.stringify(figure)));
	return second.figures.filter((figure) => !known.has(JSON.stringify(figure)));
}

function faultsOf(first: Evaluation, second: Evaluation): Fault[] {
	const known = new Set(first.errors.map((fault) => JSON.stringify(fault)));
	return second.errors.filter((fault) => !known.has(JSON.stringify(fault)));
}

function sweepsOf(
	{ sweeps: first = [] }: Evaluation,
	{ sweeps: second = [] }: Evaluation,
): Sweep[] {
	const known = new Set(first.map((sweep) => JSON.stringify(sweep)));
	return second.filter((sweep) => !known.has(JSON.stringify(sweep)));
}
