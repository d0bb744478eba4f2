import { createHash } from 'node:crypto';
import fc from 'fast-check';
import { expect, test } from 'vitest';
import { extendsRecord, includes } from '../support/transparency';
import {
	consistencyProof,
	extended,
	inclusionProof,
	leafHash,
	rootOf,
	treeRoot,
} from '$lib/server/signed-record/merkle';

const leaves = (count: number) => Array.from({ length: count }, (_, i) => leafHash(`entry ${i}`));

test('the roots are those of RFC 6962, 2.1', () => {
	const hash = (text: string) =>
		createHash('sha256').update(Buffer.from(text, 'hex')).digest('hex');
	expect(rootOf([])).toBe(hash(''));
	// The leaf of no bytes, and a tree of two such: 0x00 before a leaf, 0x01 before two nodes.
	expect(leafHash('')).toBe(hash('00'));
	expect(treeRoot([leafHash(''), leafHash('')])).toBe(hash(`01${hash('00')}${hash('00')}`));
	const [a = '', b = '', c = ''] = leaves(3);
	expect(treeRoot([a, b, c])).toBe(hash(`01${hash(`01${a}${b}`)}${c}`));
});

test('a tree that grows leaf by leaf has the root of the whole', () => {
	let peaks: string[] = [];
	for (let size = 0; size < 70; size++) {
		expect(rootOf(peaks)).toBe(treeRoot(leaves(size)));
		peaks = extended(peaks, size, leafHash(`entry ${size}`));
	}
});

test('each entry is proved to be in, and no other one', () => {
	fc.assert(
		fc.property(fc.integer({ min: 1, max: 130 }), fc.nat(), (size, any) => {
			const index = any % size;
			const all = leaves(size);
			const proof = { index, size, leaf: all[index] ?? '', proof: inclusionProof(all, index) };
			const root = treeRoot(all);
			expect(includes(proof, root)).toBe(true);
			expect(includes({ ...proof, leaf: leafHash('another') }, root)).toBe(false);
			expect(includes({ ...proof, index: (index + 1) % size }, root)).toBe(size === 1);
			expect(includes({ ...proof, proof: [...proof.proof, root] }, root)).toBe(false);
		}),
		{ numRuns: 300 },
	);
});

test('a later record is proved to begin with an earlier one, and a fork cannot be', () => {
	fc.assert(
		fc.property(fc.integer({ min: 1, max: 130 }), fc.nat(), fc.nat(), (size, any, other) => {
			const from = 1 + (any % size);
			const all = leaves(size);
			const first = treeRoot(all.slice(0, from));
			const proof = { from, size, proof: consistencyProof(all, from) };
			expect(extendsRecord(proof, first, treeRoot(all))).toBe(true);
			const forked = [...all];
			forked[other % from] = leafHash('rewritten');
			const fork = { from, size, proof: consistencyProof(forked, from) };
			expect(extendsRecord(fork, first, treeRoot(forked))).toBe(false);
			expect(extendsRecord(proof, first, treeRoot(forked))).toBe(false);
		}),
		{ numRuns: 300 },
	);
});
