import type { Evaluation } from '$lib/calc/results';
import { AppError } from '$lib/errors';
import type { NoteContent } from '$lib/note/document';
import type { ComparedSide, Comparison, Side, WaiverChange } from '$lib/schemas/comparison';
import type { SignOff } from '$lib/schemas/review';
import { eq } from 'drizzle-orm';
import { demand, type Actor } from '../auth/access';
import { db } from '../db/client';
import { candidate } from '../db/schema/review';
import { optionsOf } from '../evaluation/note-options';
import { evaluateInChild } from '../evaluation/pool';
import { current } from '../evaluation/store';
import * as notes from '../notes/notes';
import * as standings from '../revisions/standing';
import { tolerance } from './amounts';
import { shareTolerance } from './budgets';
import { commentsBetween } from './comments';
import { differences } from './differences';
import { chosen, sidesOf, type KnownSide } from './sides';

interface Asked {
	from?: string | undefined;
	to?: string | undefined;
}

/** What of a note the actor may compare, the oldest first. */
export async function sides(actor: Actor, number: string): Promise<Side[]> {
	demand(actor, 'readFrozen');
	const { id } = await notes.get(actor, number);
	return (await sidesOf(actor, id)).map(plain);
}

/**
 * What differs between two sides of a note: revisions, candidates, the working copy. Where nothing is asked for, the
 * newest against the one before it. Null where there are no two. Throws AppError `notFound`.
 */
export async function compare(
	actor: Actor,
	number: string,
	asked: Asked,
): Promise<Comparison | null> {
	demand(actor, 'readFrozen');
	const { id } = await notes.get(actor, number);
	const two = chosen(await sidesOf(actor, id), asked);
	if (!two) return null;
	const [from, to] = await Promise.all([read(id, two.from), read(id, two.to)]);
	const wanted = budgetNames(from.results, to.results);
	const [before, after] = await Promise.all([detailed(from, wanted), detailed(to, wanted)]);
	return {
		from: said(two.from, from),
		to: said(two.to, to),
		...differences(before, after),
		waivers: waiverChanges(from.signOffs, to.signOffs),
		comments: await commentsBetween(id, two.from, two.to),
		tolerance,
		shareTolerance,
	};
}

interface ReadSide {
	content: NoteContent;
	results: Evaluation;
	signOffs: SignOff[];
	pending: boolean;
	isFrozen: boolean;
}

async function read(noteId: string, { candidateId }: KnownSide): Promise<ReadSide> {
	if (candidateId === null) {
		const { content, results, pending } = await current(noteId);
		return { content, results, pending, signOffs: [], isFrozen: false };
	}
	const [row] = await db()
		.select({ content: candidate.content, results: candidate.results })
		.from(candidate)
		.where(eq(candidate.id, candidateId));
	if (!row) throw new AppError('notFound', 'There is no such state of this note.');
	const signOffs = await standings.signOffsOf(db(), candidateId);
	return { ...row, signOffs, pending: false, isFrozen: true };
}

/** Quantities whose budgets are compared: those that requirements speak of, and those that a side keeps one of. */
function budgetNames(...results: Evaluation[]): string[] {
	const names = results.flatMap(({ requirements, quantities }) => [
		...requirements.flatMap(({ dependsOn }) => dependsOn),
		...Object.keys(quantities).filter((name) => quantities[name]?.budget),
	]);
	return [...new Set(names)];
}

/** The working copy's stored results have no budgets; what was frozen stays as it was frozen. */
async function detailed(side: ReadSide, names: readonly string[]): Promise<ReadSide> {
	const detail = names.filter(
		(name) => side.results.quantities[name]?.standardUncertainty !== undefined,
	);
	if (side.isFrozen || detail.length === 0) return side;
	const options = { ...optionsOf(side.content), detail };
	const results = await evaluateInChild(side.content.cells, options);
	// Budgets that take too long to compute must not make every figure look lost.
	return results.errors.length > side.results.errors.length ? side : { ...side, results };
}

function said(side: KnownSide, { content, results, signOffs, pending }: ReadSide): ComparedSide {
	const faults = new Set(results.errors.map(({ cell, line }) => `${cell} ${line}`)).size;
	return {
		...plain(side),
		title: content.title,
		engine: results.engine,
		signOffs,
		pending,
		faults,
		cells: content.cells.map(({ id }) => id),
	};
}

function plain({ key, kind, label, standing, at, digest }: KnownSide): Side {
	return { key, kind, label, standing, at, digest };
}

function waiverChanges(from: readonly SignOff[], to: readonly SignOff[]): WaiverChange[] {
	const of = (signOffs: readonly SignOff[]) =>
		signOffs.flatMap(({ name, waivers = [] }) => waivers.map((waiver) => ({ name, waiver })));
	const [before, after] = [of(from), of(to)];
	const isIn = (list: typeof before, { waiver }: (typeof before)[number]) =>
		list.some(
			(one) => one.waiver.requirement === waiver.requirement && one.waiver.reason === waiver.reason,
		);
	return [
		...after
			.filter((one) => !isIn(before, one))
			.map((one) => ({ change: 'added' as const, ...one })),
		...before
			.filter((one) => !isIn(after, one))
			.map((one) => ({ change: 'removed' as const, ...one })),
	];
}
