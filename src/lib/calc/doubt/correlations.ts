/** Correlation coefficient between two inputs, by their numbers. */
export interface Correlation {
	first: number;
	second: number;
	coefficient: number;
}

/** Why correlations cannot be used, with the place of the offending one in the list. */
export interface CorrelationFault {
	fault: 'coefficient' | 'itself' | 'twice' | 'impossible';
	index: number;
	message: string;
}

/** Inputs that hang together by correlations, with the lower triangular factor of their correlation matrix. */
export interface Group {
	members: Int32Array;
	/** Correlation matrix and its Cholesky factor, row by row. */
	matrix: Float64Array;
	factor: Float64Array;
}

export interface Correlations {
	pairs: readonly Correlation[];
	groups: readonly Group[];
	/** Group of each correlated input. */
	groupOf: ReadonlyMap<number, Group>;
}

export const uncorrelated: Correlations = { pairs: [], groups: [], groupOf: new Map() };

/** How far a pivot may fall below zero by rounding alone. */
const slack = 1e-12;

/** Checks coefficients and sets up their groups; a matrix that no set of quantities can have is a fault. */
export function correlate(pairs: readonly Correlation[]): Correlations | CorrelationFault {
	if (pairs.length === 0) return uncorrelated;
	const links = new Map<number, Map<number, number>>();
	for (const [index, { first, second, coefficient }] of pairs.entries()) {
		const fault = pairFault(first, second, coefficient, links);
		if (fault) return { ...fault, index };
		link(links, first, second, coefficient);
		link(links, second, first, coefficient);
	}
	const groups: Group[] = [];
	const groupOf = new Map<number, Group>();
	for (const start of links.keys()) {
		if (groupOf.has(start)) continue;
		const members = connected(links, start);
		const matrix = new Float64Array(members.length ** 2);
		for (const [i, row] of members.entries())
			for (const [j, column] of members.entries())
				matrix[i * members.length + j] = i === j ? 1 : (links.get(row)?.get(column) ?? 0);
		const factor = choleskyFactor(matrix, members.length);
		if (!factor) {
			const index = pairs.findLastIndex((pair) => members.includes(pair.first));
			const message =
				'These correlations contradict each other: no quantities can have all of them';
			return { fault: 'impossible', index, message };
		}
		const group = { members: Int32Array.from(members), matrix, factor };
		groups.push(group);
		for (const member of members) groupOf.set(member, group);
	}
	return { pairs, groups, groupOf };
}

/** Lower triangular factor of a positive semidefinite matrix of n rows, undefined where it is not one. */
export function choleskyFactor(matrix: Float64Array, n: number): Float64Array | undefined {
	const factor = new Float64Array(n * n);
	for (let j = 0; j < n; j++) {
		let pivot = matrix[j * n + j]!;
		for (let k = 0; k < j; k++) pivot -= factor[j * n + k]! ** 2;
		if (!(pivot >= -slack)) return undefined;
		const root = pivot > slack ? Math.sqrt(pivot) : 0;
		factor[j * n + j] = root;
		for (let i = j + 1; i < n; i++) {
			let rest = matrix[i * n + j]!;
			for (let k = 0; k < j; k++) rest -= factor[i * n + k]! * factor[j * n + k]!;
			if (root > 0) factor[i * n + j] = rest / root;
			// Nothing is left of this quantity, so that nothing may be left of what it shares with another.
			else if (Math.abs(rest) > Math.sqrt(slack)) return undefined;
		}
	}
	return factor;
}

function pairFault(
	first: number,
	second: number,
	coefficient: number,
	links: Map<number, Map<number, number>>,
): Omit<CorrelationFault, 'index'> | undefined {
	if (!(Math.abs(coefficient) <= 1))
		return { fault: 'coefficient', message: 'A correlation coefficient lies between −1 and 1' };
	if (first === second)
		return { fault: 'itself', message: 'A quantity cannot be correlated with itself' };
	if (links.get(first)?.has(second))
		return { fault: 'twice', message: 'The correlation of these two is stated twice' };
	return undefined;
}

function link(links: Map<number, Map<number, number>>, from: number, to: number, r: number): void {
	const known = links.get(from) ?? new Map<number, number>();
	known.set(to, r);
	links.set(from, known);
}

function connected(links: Map<number, Map<number, number>>, start: number): number[] {
	const found = new Set([start]);
	for (const member of found) for (const other of links.get(member)?.keys() ?? []) found.add(other);
	return [...found].sort((x, y) => x - y);
}
