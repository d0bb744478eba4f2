import { flat } from './curvature';
import { uncorrelated, type Correlations } from './correlations';
import type { Propagated } from './propagate';
import { coverageFactor } from './student';

/** What is known of the note's inputs, by their numbers. Infinite degrees of freedom are `Infinity`. */
export interface Doubts {
	uncertainties: ArrayLike<number>;
	dofs: ArrayLike<number>;
	correlations?: Correlations;
}

/** The parts that inputs have in a quantity's uncertainty, in columns, the greatest contribution first. */
export interface Budget {
	/** Places of the inputs in the quantity's support, and of their sensitivities in its gradient. */
	places: number[];
	/** |sensitivity| × standard uncertainty, in the quantity's unit. */
	contributions: number[];
	/** Parts of the variance; they add up to 1, and one may be negative where inputs are correlated. */
	shares: number[];
}

export interface Uncertainty {
	standardUncertainty: number;
	/** Effective degrees of freedom, not truncated; `Infinity` where all that contribute have infinite ones. */
	dof: number;
	coverageFactor: number;
	expandedUncertainty: number;
}

/** Second-order terms: what they make of the standard uncertainty and how far they shift the estimate. */
export interface SecondOrder {
	standardUncertainty: number;
	/** Relative change of u; 1 where first order finds none at all. */
	change: number;
	shift: number;
}

/** Change of u by second-order terms above which first order is not enough. */
export const notableChange = 0.01;

/**
 * Combined standard uncertainty (JCGM 100:2008, 5.1.2 and 5.2.2), effective degrees of freedom (G.4.1), coverage factor
 * and expanded uncertainty. For the factor the degrees of freedom are truncated to a whole number, as in H.1.6.
 * G.4.1 holds for independent contributions: inputs that are correlated count together as one of them, with the
 * smallest degrees of freedom among them. So means of readings taken together, as in H.2, keep n − 1.
 */
export function uncertaintyOf(line: Propagated, doubts: Doubts, coverage: number): Uncertainty {
	const { support, gradient } = line;
	const correlations = doubts.correlations ?? uncorrelated;
	const alone = correlations.groups.length === 0;
	let variance = 0;
	let spread = 0;
	let groups: Map<object, { variance: number; dof: number }> | undefined;
	for (let i = 0; i < support.length; i++) {
		const input = support[i]!;
		const part = gradient[i]! * doubts.uncertainties[input]!;
		const group = alone ? undefined : correlations.groupOf.get(input);
		if (group) {
			groups ??= new Map();
			const known = groups.get(group) ?? { variance: 0, dof: Infinity };
			known.variance += part * correlated(line, doubts, i);
			if (part !== 0) known.dof = Math.min(known.dof, doubts.dofs[input]!);
			groups.set(group, known);
		} else {
			const square = part * part;
			variance += square;
			spread += (square * square) / doubts.dofs[input]!;
		}
	}
	for (const group of groups?.values() ?? []) {
		variance += group.variance;
		spread += group.variance ** 2 / group.dof;
	}
	// Full negative correlation may leave a rounding error below zero.
	const standardUncertainty = Math.sqrt(Math.max(variance, 0));
	const dof = spread > 0 ? (variance * variance) / spread : Infinity;
	const factor = coverageFactor(coverage, Math.max(1, Math.floor(dof)));
	return {
		standardUncertainty,
		dof,
		coverageFactor: factor,
		expandedUncertainty: factor * standardUncertainty,
	};
}

/** Scratch for putting a budget in its order. It begins with that of the budget before, as lines that follow each other are alike. */
let [order, keys] = [Int32Array.from({ length: 64 }, (_, i) => i), new Float64Array(64)];
let ordered = 0;

/** Columns are copies of these: a list of its final size and kind costs least to make. */
let [noNumbers, noPlaces] = [new Array<number>(64).fill(0.5), new Array<number>(64).fill(0)];

/** Makes room for budgets of `n` inputs, and begins a new order where the one before had another size. */
function prepare(n: number): void {
	if (order.length < n) {
		[order, keys] = [new Int32Array(2 * n), new Float64Array(2 * n)];
		[noNumbers, noPlaces] = [new Array<number>(2 * n).fill(0.5), new Array<number>(2 * n).fill(0)];
		ordered = 0;
	}
	if (ordered === n) return;
	for (let i = 0; i < n; i++) order[i] = i;
	ordered = n;
}

/** Contributions of all inputs a quantity depends on, those without effect too. */
export function budgetOf(line: Propagated, doubts: Doubts): Budget {
	const { support, gradient } = line;
	const n = support.length;
	const alone = (doubts.correlations ?? uncorrelated).groups.length === 0;
	prepare(n);
	for (let k = 0; k < n; k++) {
		const i = order[k]!;
		const part = Math.abs(gradient[i]! * doubts.uncertainties[support[i]!]!);
		// Put in its place among those before it: they are few. Of equal ones the first input stands first.
		let to = k;
		for (; to > 0; to--) {
			const before = keys[to - 1]!;
			if (!(before < part || (before === part && order[to - 1]! > i))) break;
			keys[to] = before;
			order[to] = order[to - 1]!;
		}
		keys[to] = part;
		order[to] = i;
	}
	let variance = 0;
	const places = noPlaces.slice(0, n);
	const contributions = noNumbers.slice(0, n);
	const shares = noNumbers.slice(0, n);
	for (let k = 0; k < n; k++) {
		const i = order[k]!;
		const contribution = keys[k]!;
		const share =
			contribution * (alone ? contribution : Math.sign(gradient[i]!) * correlated(line, doubts, i));
		variance += share;
		places[k] = i;
		contributions[k] = contribution;
		shares[k] = share;
	}
	for (let k = 0; k < n; k++) shares[k] = variance > 0 ? shares[k]! / variance : 0;
	return { places, contributions, shares };
}

/**
 * Second-order terms of a quantity (JCGM 100:2008, 5.1.2 note), undefined where they were not computed. The note holds
 * for independent inputs; of correlated ones the product of second derivatives is taken with the correlation matrix,
 * exact for normal inputs, the third derivatives only where two of their three inputs are the same.
 */
export function secondOrderOf(line: Propagated, doubts: Doubts): SecondOrder | undefined {
	const { curvature, gradient, support } = line;
	if (!curvature) return undefined;
	const n = support.length;
	const parts = Float64Array.from(gradient, (_, i) => correlated(line, doubts, i));
	let first = 0;
	for (let i = 0; i < n; i++)
		first += gradient[i]! * doubts.uncertainties[support[i]!]! * parts[i]!;
	let [second, shift] = [0, 0];
	if (curvature !== flat) {
		const bent = withCorrelations(curvature, support, doubts.correlations ?? uncorrelated);
		for (let j = 0; j < n; j++) {
			shift += 0.5 * bent[j * n + j]!;
			for (let i = 0; i < n; i++)
				second +=
					0.5 * bent[j * n + i]! * bent[i * n + j]! + parts[i]! * curvature[(n + j) * n + i]!;
		}
	}
	const plain = Math.sqrt(Math.max(first, 0));
	const standardUncertainty = Math.sqrt(Math.max(first + second, 0));
	const change = plain > 0 ? standardUncertainty / plain - 1 : standardUncertainty > 0 ? 1 : 0;
	return { standardUncertainty, change, shift };
}

/** Whether a first-order result must be doubted: its second-order terms matter, or are too many to know. */
export function needsTrials(line: Propagated, doubts: Doubts): boolean {
	const second = secondOrderOf(line, doubts);
	return !second || !(Math.abs(second.change) <= notableChange);
}

/** Sum over j of r_ij c_j u_j for input i of the line. */
function correlated(line: Propagated, doubts: Doubts, i: number): number {
	const { support, gradient } = line;
	const group = doubts.correlations?.groupOf.get(support[i]!);
	if (!group) return gradient[i]! * doubts.uncertainties[support[i]!]!;
	const row = group.members.indexOf(support[i]!) * group.members.length;
	let sum = 0;
	for (let j = 0; j < support.length; j++) {
		const column = group.members.indexOf(support[j]!);
		if (column >= 0)
			sum += group.matrix[row + column]! * gradient[j]! * doubts.uncertainties[support[j]!]!;
	}
	return sum;
}

/** Second derivatives times the correlation matrix. */
function withCorrelations(
	curvature: Float64Array,
	support: Int32Array,
	correlations: Correlations,
): Float64Array {
	const n = support.length;
	if (!support.some((input) => correlations.groupOf.has(input))) return curvature;
	const product = curvature.slice(0, n * n);
	for (let j = 0; j < n; j++) {
		const group = correlations.groupOf.get(support[j]!);
		if (!group) continue;
		const column = group.members.indexOf(support[j]!);
		for (let k = 0; k < n; k++) {
			const row = group.members.indexOf(support[k]!);
			if (k === j || row < 0) continue;
			const r = group.matrix[row * group.members.length + column]!;
			for (let i = 0; i < n; i++) product[i * n + j]! += curvature[i * n + k]! * r;
		}
	}
	return product;
}
