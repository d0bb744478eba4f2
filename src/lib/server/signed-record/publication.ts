import { AppError } from '$lib/errors';
import { lt } from 'drizzle-orm';
import { db } from '../db/client';
import { signedEntry } from '../db/schema/record';
import * as checkpoints from './checkpoints';
import * as entries from './entries';
import { consistencyProof, inclusionProof } from './merkle';
import type { KeyStatement } from './statement';

/** The installation's public keys, the first one first: the last one signs, the others did before. */
export async function published(): Promise<{ origin: string; keys: KeyStatement['key'][] }> {
	return { origin: checkpoints.origin(), keys: await entries.keysOf(db()) };
}

/** That the entry of an index is in the record of a size: its hash, and the hashes that lead to the root. */
export async function inclusion(
	index: number,
	size: number,
): Promise<{ index: number; size: number; leaf: string; proof: string[] }> {
	const leaves = await leavesTo(size);
	const leaf = leaves[index];
	if (leaf === undefined) throw new AppError('invalid', 'The index lies beyond the size.');
	return { index, size, leaf, proof: inclusionProof(leaves, index) };
}

/** That the record of a size begins with the record of an earlier one. */
export async function consistency(
	from: number,
	size: number,
): Promise<{ from: number; size: number; proof: string[] }> {
	if (from > size) throw new AppError('invalid', 'The earlier size is the larger one.');
	return { from, size, proof: consistencyProof(await leavesTo(size), from) };
}

async function leavesTo(size: number): Promise<string[]> {
	const rows = await db()
		.select({ hash: signedEntry.hash })
		.from(signedEntry)
		.where(lt(signedEntry.index, size))
		.orderBy(signedEntry.index);
	if (rows.length !== size) throw new AppError('notFound', 'The record is not as long as that.');
	return rows.map(({ hash }) => hash);
}
