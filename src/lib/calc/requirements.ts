import { hasNames, type Comparison, type Node } from './language/nodes';
import type { Note } from './note';
import type { NoteLine } from './note-lines';
import type { Display, Options, Requirement, Verdict } from './results';
import type { Step } from './steps';
import { holds } from './arithmetic';
import { choiceOf, inChosenUnit } from './chosen-unit';
import type { Uncertainty } from './doubt/budget';
import { decide, type Conformity } from './doubt/conformity';
import { statesInput } from './doubtful-calls';
import { finiteUncertainty } from './uncertainty';
import { show, unitOf } from './show';
import { Trouble } from './trouble';
import type { Type } from './types';
import { compose, readout } from './units/display';
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
export function judge(line: NoteLine, note: Note, options: Options): Requirement | undefined {
	if (!line.requirement || line.kind === 'blank' || line.kind === 'comment') return undefined;
	const remembered = note.remembered.get(line);
	const known = remembered?.shown;
	const choice = choiceOf(nameOfValue(line, note), options);
	if (
		known?.correlations === note.correlations &&
		known.requirement &&
		known.choice?.unit === choice?.unit &&
		known.choice?.digits === choice?.digits
	) {
		const { requirement } = known;
		if (requirement.cell === line.cell && requirement.line === line.line) return requirement;
		return (known.requirement = { ...requirement, cell: line.cell, line: line.line });
	}
	try {
		const requirement = assess(line, note, options, choice);
		// One that states inputs of its own is judged anew each time, so that they are numbered.
		if (remembered && requirement && line.body && !statesInput(line.body)) {
			const { correlations } = note;
			remembered.shown = {
				correlations,
				readout: compose('', ''),
				fields: {},
				requirement,
				choice,
			};
		}
		return requirement;
	} catch (error) {
		if (!(error instanceof Trouble)) throw error;
		note.fail(line, error);
		return undefined;
	}
}

/** Name of the quantity whose value a requirement limits, where it is one as it stands. */
function nameOfValue({ body }: NoteLine, note: Note): string | undefined {
	if (body?.kind !== 'compare') return undefined;
	const value = limitedBy(body.operands);
	return value?.kind === 'name' ? note.definition(value.name)?.defined?.typed : undefined;
}

function assess(
	line: NoteLine,
	note: Note,
	options: Options,
	choice: Display | undefined,
): Requirement | undefined {
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
	const sides = limits.map(({ node, op }) => ({ op, node, si: note.measure(node).value }));
	// The distance to a limit is followed as a whole: what value and limit share cancels.
	const [own, ...steps] = note.traced(line, [
		value,
		...sides.map(({ node, op }) => distanceNode(op, value, node)),
	]);
	const uncertain = (step: Step | undefined, at: Node): Uncertainty => {
		if (!step) return exact;
		const found = finiteUncertainty(step, note.doubts, options.coverage);
		if (!found)
			throw new Trouble(
				'value',
				at,
				'This has no finite uncertainty, so that no verdict can be given.',
				{
					mend: 'Compare plain values, `value(x)`, or look at trials.',
				},
			);
		return found;
	};
	const bounds = sides.map((side, i) => ({ ...side, doubt: uncertain(steps[i], side.node) }));
	const doubt = uncertain(own, value);
	return verdictOf(line, measured, bounds, doubt, options.decisionRule, choice);
}

const exact: Uncertainty = {
	standardUncertainty: 0,
	dof: Infinity,
	coverageFactor: 0,
	expandedUncertainty: 0,
};

function distanceNode(op: Comparison, value: Node, limit: Node): Node {
	const [left, right] = op.startsWith('>') ? [value, limit] : [limit, value];
	return { kind: 'binary', op: '-', left, right, from: limit.from, to: limit.to };
}

/** Which side is the value and which are the limits. Throws Trouble `notComparable`. */
export function shapeOf(body: Node): Shape {
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
	if (limitedBy(body.operands) === middle)
		return { value: middle, limits: [{ node: first, op: turned[op] }] };
	return { value: first, limits: [{ node: middle, op }] };
}

/** The operand that a comparison speaks of: `2 V < Vadc` is about Vadc, the side without names is the limit. */
function limitedBy([first, second, third]: readonly Node[]): Node | undefined {
	const turns = first && second && !hasNames(first) && hasNames(second);
	return third || turns ? second : first;
}

interface Bound {
	op: Comparison;
	si: number;
	/** Of the distance to it. */
	doubt: Uncertainty;
}

function verdictOf(
	line: NoteLine,
	measured: { value: number; type: Type },
	bounds: Bound[],
	doubt: Uncertainty,
	rule: Options['decisionRule'],
	choice: Display | undefined,
): Requirement {
	const { value, type } = measured;
	const unit = unitOf(type);
	const distance = ({ op, si }: Bound) => {
		if (op === '==') return -Math.abs(value - si);
		return op.startsWith('<') ? si - value : value - si;
	};
	const nearest = bounds.reduce((a, b) => (distance(b) < distance(a) ? b : a));
	// What rounding leaves at the very limit is no margin.
	const margin = holds('==', value, nearest.si) ? 0 : distance(nearest);
	const relative = type.point || nearest.si === 0 ? null : margin / Math.abs(nearest.si);
	const { verdict, probability } = bounds.every((bound) => bound.doubt === exact)
		? plainVerdict(value, bounds)
		: decided(bounds, distance, rule);
	const set = inChosenUnit(type, choice);
	const spoken = (si: number) => show(si, set).text;
	const lower = bounds.find(({ op }) => op.startsWith('>') || op === '==');
	const upper = bounds.find(({ op }) => op.startsWith('<') || op === '==');
	const guard = (bound: Bound | undefined) =>
		bound && bound.doubt !== exact ? differenceFromSI(bound.doubt.expandedUncertainty, unit) : null;
	const guardBand = { lower: guard(lower), upper: guard(upper) };
	const guarded = guardBand.lower !== null || guardBand.upper !== null;
	return {
		cell: line.cell,
		line: line.line,
		verdict,
		margin: differenceFromSI(margin, unit),
		relativeMargin: relative,
		unit: unit.text,
		text: sentence(verdict, nearest, margin, relative, set),
		value: fromSI(value, unit),
		lower: lower ? fromSI(lower.si, unit) : null,
		upper: upper ? fromSI(upper.si, unit) : null,
		valueText: show(value, set, doubt.expandedUncertainty || undefined, choice?.digits).text,
		lowerText: lower ? spoken(lower.si) : null,
		upperText: upper ? spoken(upper.si) : null,
		...(doubt !== exact && {
			expandedUncertainty: differenceFromSI(doubt.expandedUncertainty, unit),
		}),
		...(guarded && { guardBand }),
		dependsOn: line.references.map(({ typed }) => typed),
		probability,
	};
}

function plainVerdict(
	value: number,
	bounds: readonly Bound[],
): Pick<Conformity, 'verdict' | 'probability'> {
	const met = bounds.every(({ op, si }) => holds(op, value, si));
	return met ? { verdict: 'met', probability: 1 } : { verdict: 'not met', probability: 0 };
}

/** An equality in doubt is never met for certain: it is undecided while the two agree within their uncertainty. */
function decided(
	bounds: readonly Bound[],
	distance: (bound: Bound) => number,
	rule: Options['decisionRule'],
): Pick<Conformity, 'verdict' | 'probability'> {
	if (bounds.some(({ op }) => op === '==')) {
		const apart = bounds.some((bound) => -distance(bound) > bound.doubt.expandedUncertainty);
		return { verdict: apart ? 'not met' : 'undecided', probability: 0 };
	}
	return decide(
		bounds.map((bound) => ({
			margin: distance(bound),
			...bound.doubt,
			strict: bound.op === '<' || bound.op === '>',
		})),
		rule,
	);
}

/** "Met, 1.5 % to spare". The margin has two or three digits: it is a distance, not a result. */
function sentence(
	verdict: Verdict,
	{ op, doubt }: Bound,
	margin: number,
	relative: number | null,
	type: Type,
): string {
	const difference: Type = type.point
		? { kind: 'number', ...(type.dimension && { dimension: type.dimension }) }
		: type;
	const amount = (si: number) =>
		readout(Math.abs(si), unitOf(difference), !difference.fixed, 3).text;
	if (verdict === 'undecided') {
		const band = `±\u00a0${amount(doubt.expandedUncertainty)}`;
		if (op === '==') return `Undecided, equal within ${band}`;
		const where = margin < 0 ? `${amount(margin)} beyond the limit` : `${amount(margin)} to spare`;
		return `Undecided, ${where} within ${band}`;
	}
	const met = verdict === 'met';
	if (margin === 0)
		return met
			? op === '=='
				? 'Met, equal'
				: 'Met, exactly at the limit'
			: 'Not met, exactly at the limit';
	if (!met)
		return op === '=='
			? `Not met, ${amount(margin)} apart`
			: `Not met, ${amount(margin)} beyond the limit`;
	if (relative === null || relative > 10) return `Met, ${amount(margin)} to spare`;
	return `Met, ${percentage(relative)} to spare`;
}

function percentage(share: number): string {
	return `${Number((share * 100).toPrecision(2))}\u00a0%`;
}
