import { createHash } from 'node:crypto';

/** Hashes are hexadecimal SHA-256, trees those of RFC 6962, 2.1. */
const leafMark = Buffer.of(0);
const nodeMark = Buffer.of(1);

/** Hash of a leaf. */
export function leafHash(data: string): string {
	return createHash('sha256').update(leafMark).update(data, 'utf8').digest('hex');
}

function nodeHash(left: string, right: string): string {
	const hash = createHash('sha256').update(nodeMark);
	return hash.update(left, 'hex').update(right, 'hex').digest('hex');
}

/** Peaks of a tree of `size` leaves with one leaf more: hashes of its perfect trees, largest first. */
export function extended(peaks: readonly string[], size: number, leaf: string): string[] {
	const next = [...peaks];
	let hash = leaf;
	for (let rest = size; rest % 2 === 1; rest = Math.floor(rest / 2)) {
		hash = nodeHash(next.pop() ?? '', hash);
	}
	return [...next, hash];
}

/** Root over peaks; of nothing, the hash of nothing. */
export function rootOf(peaks: readonly string[]): string {
	const [last, ...others] = [...peaks].reverse();
	if (last === undefined) return createHash('sha256').digest('hex');
	return others.reduce((hash, peak) => nodeHash(peak, hash), last);
}

/** Root over leaves. */
export function treeRoot(leaves: readonly string[]): string {
	let peaks: string[] = [];
	for (const [size, leaf] of leaves.entries()) peaks = extended(peaks, size, leaf);
	return rootOf(peaks);
}

/** Hashes that lead from a leaf to the root over all leaves (RFC 6962, 2.1.1). */
export function inclusionProof(leaves: readonly string[], index: number): string[] {
	if (leaves.length <= 1) return [];
	const split = splitOf(leaves.length);
	const [left, right] = [leaves.slice(0, split), leaves.slice(split)];
	return index < split
		? [...inclusionProof(left, index), treeRoot(right)]
		: [...inclusionProof(right, index - split), treeRoot(left)];
}

/** Hashes that show that the tree over all leaves begins with the tree over the first `size` (RFC 6962, 2.1.2). */
export function consistencyProof(leaves: readonly string[], size: number): string[] {
	return size === 0 || size === leaves.length ? [] : subProof(leaves, size, true);
}

function subProof(leaves: readonly string[], size: number, whole: boolean): string[] {
	if (size === leaves.length) return whole ? [] : [treeRoot(leaves)];
	const split = splitOf(leaves.length);
	const [left, right] = [leaves.slice(0, split), leaves.slice(split)];
	return size <= split
		? [...subProof(left, size, whole), treeRoot(right)]
		: [...subProof(right, size - split, false), treeRoot(left)];
}

/** The largest power of two below a number of leaves. */
function splitOf(count: number): number {
	let split = 1;
	while (split * 2 < count) split *= 2;
	return split;
}
