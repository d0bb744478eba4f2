import { hasNames, type Comparison, type Node } from './language/nodes';
import type { Note } from './note';
import type { NoteLine } from './note-lines';
import type { Options, Requirement, Verdict } from './results';
import { holds } from './arithmetic';
import { unitOf } from './show';
import { Trouble } from './trouble';
import type { Type } from './types';
import { readout } from './units/display';
import { differenceFromSI, fromSI } from './units/unit';

interface Limit {
	node: Node;
	/** The comparison with the value on its left. */
	op: Comparison;
}

interface Shape {
	value: Node;
	limits: Limit[];
}

const turned: Readonly<Record<Comparison, Comparison>> = {
	'<': '>',
	'<=': '>=',
	'>': '<',
	'>=': '<=',
	'==': '==',
	'!=': '!=',
};

/** Judges a requirement line. Undefined for blank lines, comments and lines with an error. */
export function judge(line: NoteLine, note: Note, _options: Options): Requirement | undefined {
	if (!line.requirement || line.kind === 'blank' || line.kind === 'comment') return undefined;
	try {
		return assess(line, note);
	} catch (error) {
		if (!(error instanceof Trouble)) throw error;
		note.fail(line, error);
		return undefined;
	}
}

function assess(line: NoteLine, note: Note): Requirement | undefined {
	if (line.kind === 'definition' || line.kind === 'function')
		throw new Trouble(
			'notComparable',
			line.defined ?? { from: 0, to: line.text.length },
			'A requirement compares; it defines nothing.',
			{
				mend: 'Write `<=`, `>=` or `==`, or define the quantity in a calculation.',
			},
		);
	if (note.troubles.has(line) && !note.computed.has(line)) return undefined;
	const { body } = line;
	if (!body) return undefined;
	const { value, limits } = shapeOf(body);
	const measured = note.measure(value);
	const bounds = limits.map(({ node, op }) => ({ op, node, si: note.measure(node).value }));
	return verdictOf(line, measured, bounds);
}

/** Which side is the value and which are the limits. Throws Trouble `notComparable`. */
function shapeOf(body: Node): Shape {
	if (body.kind !== 'compare')
		throw new Trouble('notComparable', body, 'A requirement is a comparison.', {
			mend: 'Write `quantity <= limit`, or `lowest <= quantity <= highest`.',
		});
	const [op, second] = body.ops;
	const [first, middle, last] = body.operands;
	if (!op || !first || !middle)
		throw new Trouble('notComparable', body, 'A requirement is a comparison.');
	if (body.ops.includes('!='))
		throw new Trouble('notComparable', body, '`!=` has no margin and makes no requirement.');
	if (second && last) {
		const same = op.startsWith('<') === second.startsWith('<') && op !== '==' && second !== '==';
		if (!same || body.ops.length > 2)
			throw new Trouble(
				'notComparable',
				body,
				'A requirement with two limits goes one way: `lowest <= quantity <= highest`.',
			);
		return {
			value: middle,
			limits: [
				{ node: first, op: turned[op] },
				{ node: last, op: second },
			],
		};
	}
	// `2 V < Vadc` speaks of Vadc: the side without names is the limit.
	if (!hasNames(first) && hasNames(middle))
		return { value: middle, limits: [{ node: first, op: turned[op] }] };
	return { value: first, limits: [{ node: middle, op }] };
}

interface Bound {
	op: Comparison;
	si: number;
}

function verdictOf(
	line: NoteLine,
	measured: { value: number; type: Type },
	bounds: Bound[],
): Requirement {
	const { value, type } = measured;
	const unit = unitOf(type);
	const distance = ({ op, si }: Bound) => {
		if (op === '==') return -Math.abs(value - si);
		return op.startsWith('<') ? si - value : value - si;
	};
	const nearest = bounds.reduce((a, b) => (distance(b) < distance(a) ? b : a));
	const met = bounds.every(({ op, si }) => holds(op, value, si));
	// What rounding leaves at the very limit is no margin.
	const margin = holds('==', value, nearest.si) ? 0 : distance(nearest);
	const relative = type.point || nearest.si === 0 ? null : margin / Math.abs(nearest.si);
	const verdict: Verdict = met ? 'met' : 'not met';
	const spoken = (si: number) => readout(si, unit, !type.fixed).text;
	const lower = bounds.find(({ op }) => op.startsWith('>') || op === '==');
	const upper = bounds.find(({ op }) => op.startsWith('<') || op === '==');
	return {
		cell: line.cell,
		line: line.line,
		verdict,
		margin: differenceFromSI(margin, unit),
		relativeMargin: relative,
		unit: unit.text,
		text: sentence(met, nearest.op, margin, relative, type),
		value: fromSI(value, unit),
		lower: lower ? fromSI(lower.si, unit) : null,
		upper: upper ? fromSI(upper.si, unit) : null,
		valueText: spoken(value),
		lowerText: lower ? spoken(lower.si) : null,
		upperText: upper ? spoken(upper.si) : null,
	};
}

/** "Met, 1.5 % to spare". The margin has two or three digits: it is a distance, not a result. */
function sentence(
	met: boolean,
	op: Comparison,
	margin: number,
	relative: number | null,
	type: Type,
): string {
	if (margin === 0)
		return met
			? op === '=='
				? 'Met, equal'
				: 'Met, exactly at the limit'
			: 'Not met, exactly at the limit';
	const difference: Type = type.point
		? { kind: 'number', ...(type.dimension && { dimension: type.dimension }) }
		: type;
	const amount = readout(Math.abs(margin), unitOf(difference), !difference.fixed, 3).text;
	if (!met) return op === '==' ? `Not met, ${amount} apart` : `Not met, ${amount} beyond the limit`;
	if (relative === null || relative > 10) return `Met, ${amount} to spare`;
	return `Met, ${percentage(relative)} to spare`;
}

function percentage(share: number): string {
	return `${Number((share * 100).toPrecision(2))}\u00a0%`;
}
