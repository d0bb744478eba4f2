import type { NoteContent } from '$lib/note/document';
import { firstLine, lines, tokens, type Operation } from './operations';

/** Results as far as every page shows them: value and unit by name, and the faults. */
export interface Figures {
	quantities: Record<string, string>;
	errors: string[];
}

/** What somebody sees of a note: a page, or whoever reads the database. */
export interface View {
	name: string;
	content: NoteContent;
	/** Order key of the cell that everybody moves. */
	place: string | undefined;
	figures: Figures;
}

/** A note's whole story: what was written, and what is seen at the end. */
export interface Evidence {
	operations: readonly Operation[];
	/** Order key that the moved cell had at first. */
	firstPlace: string | undefined;
	stored: View;
	replicas: readonly View[];
	/** What the engine makes of the stored content. */
	computed: Figures;
}

export interface Verdict {
	acknowledged: number;
	lost: string[];
	doubled: string[];
	phantom: string[];
	diverged: string[];
}

/**
 * Judges a note's story by contents alone. Lost: acknowledged, and not in the database or not in a replica. Doubled:
 * there twice. Phantom: there, and written by nobody. Diverged: a replica with another content than the database, or
 * anybody with other figures than the engine computes.
 */
export function judge(evidence: Evidence): Verdict {
	const { operations, stored, replicas, computed } = evidence;
	const views = [stored, ...replicas];
	const found = views.map((view) => look(view.content));
	const lost = new Set<string>();
	const doubled = new Set<string>();
	const phantom = new Set<string>();

	const appended = operations.filter(({ kind }) => kind === 'append');
	const written = new Set(appended.map(({ value }) => value));
	for (const { counts, strange } of found) {
		for (const { value, acknowledged } of appended)
			if (acknowledged && !counts.has(value)) lost.add(value);
		for (const [token, count] of counts) {
			if (!written.has(token)) phantom.add(token);
			if (count > 1) doubled.add(token);
		}
		strange.forEach((text) => phantom.add(text));
	}

	for (const [client, writes] of linesBy(operations)) {
		for (const seen of found) {
			const values = seen.lines.get(client) ?? [];
			if (values.length > 1) doubled.add(`${client} = ${values.join(', ')}`);
			const at = writes.findIndex(({ value }) => value === values.at(-1));
			if (values.length > 0 && at < 0) phantom.add(`${client} = ${values.at(-1)}`);
			for (const { value } of writes.slice(at + 1).filter((write) => write.acknowledged))
				lost.add(`${client} = ${value}`);
		}
	}
	const clients = new Set(linesBy(operations).keys());
	for (const seen of found)
		for (const [client, values] of seen.lines)
			if (!clients.has(client)) phantom.add(`${client} = ${values.join(', ')}`);

	const places = operations.filter(({ kind }) => kind === 'place');
	for (const { place } of views) {
		const known = place === evidence.firstPlace || places.some(({ value }) => value === place);
		if (!known) phantom.add(`place ${place}`);
		// What replaced this place, or what replaced that, was acknowledged, and yet it is this place that is seen.
		for (const { value, acknowledged } of laterThan(place, places))
			if (acknowledged) lost.add(`place ${value}`);
	}

	const diverged = replicas
		.filter((view) => !same(view.content, stored.content) || view.place !== stored.place)
		.map(({ name }) => `${name}: another content`);
	for (const view of views)
		if (!same(view.figures, computed)) diverged.push(`${view.name}: other figures`);
	return {
		acknowledged: operations.filter((operation) => operation.acknowledged).length,
		lost: [...lost],
		doubled: [...doubled],
		phantom: [...phantom],
		diverged,
	};
}

interface Seen {
	counts: Map<string, number>;
	/** Numbers of each client's lines. */
	lines: Map<string, string[]>;
	/** Text that is neither. */
	strange: string[];
}

function look({ cells }: NoteContent): Seen {
	const seen: Seen = { counts: new Map(), lines: new Map(), strange: [] };
	for (const { kind, source } of cells) {
		if (kind === 'calculation') lookAtLines(source, seen);
		else lookAtTokens(source, seen);
	}
	return seen;
}

function lookAtTokens(source: string, { counts, strange }: Seen): void {
	for (const [token] of source.matchAll(tokens)) counts.set(token, (counts.get(token) ?? 0) + 1);
	const rest = source.replaceAll(tokens, '');
	if (rest !== '') strange.push(rest);
}

function lookAtLines(source: string, seen: Seen): void {
	const count = source.split(firstLine).length - 1;
	if (count !== 1) seen.strange.push(`the first line ${count} times`);
	for (const line of source.replaceAll(firstLine, '').split('\n').filter(Boolean)) {
		const [, client = '', value = ''] = lines.exec(line) ?? [];
		if (!client) seen.strange.push(line);
		else seen.lines.set(client, [...(seen.lines.get(client) ?? []), value]);
	}
}

function linesBy(operations: readonly Operation[]): Map<string, Operation[]> {
	const by = new Map<string, Operation[]>();
	for (const operation of operations) {
		if (operation.kind !== 'line') continue;
		by.set(operation.client, [...(by.get(operation.client) ?? []), operation]);
	}
	return by;
}

/** Writes that replaced this place, and those that replaced them. */
function laterThan(place: string | undefined, writes: readonly Operation[]): Operation[] {
	const later: Operation[] = [];
	const reached = new Set([place]);
	for (let grew = true; grew;) {
		grew = false;
		for (const write of writes) {
			if (reached.has(write.value) || !reached.has(write.over)) continue;
			reached.add(write.value);
			later.push(write);
			grew = true;
		}
	}
	return later;
}

function same(one: unknown, other: unknown): boolean {
	return JSON.stringify(one) === JSON.stringify(other);
}
