import { and, asc, desc, eq, lt, sql } from 'drizzle-orm';
import { demand, type Actor } from '../auth/access';
import { db } from '../db/client';
import { person } from '../db/schema/people';
import { auditLink } from '../db/schema/record';
import { auditEvent } from '../db/schema/review';

/** Entries on one page. */
const pageSize = 200;

/** An entry as people read it. */
export interface TrailEvent {
	id: number;
	/** ISO 8601, UTC. */
	at: string;
	/** Name as it is now; null where nobody signed in did it. */
	person: string | null;
	action: string;
	subject: string;
	before: unknown;
	after: unknown;
	reason: string | null;
}

/** The team's entries before an id (0: the newest), newest first. */
export async function list(actor: Actor, before: number): Promise<TrailEvent[]> {
	demand(actor, 'administer');
	const rows = await db()
		.select({ event: auditEvent, name: person.name })
		.from(auditEvent)
		.leftJoin(person, eq(person.id, auditEvent.personId))
		.where(
			and(eq(auditEvent.teamId, actor.teamId), before > 0 ? lt(auditEvent.id, before) : undefined),
		)
		.orderBy(desc(auditEvent.id))
		.limit(pageSize);
	return rows.map(({ event: { id, at, action, subject, before: was, after, reason }, name }) => ({
		id,
		at: at.toISOString(),
		person: name,
		action,
		subject,
		before: was ?? null,
		after: after ?? null,
		reason,
	}));
}

/** Every entry of the team for machines: a line each, with its position in the installation's chain and its hash. */
export async function asLines(actor: Actor): Promise<string> {
	demand(actor, 'administer');
	const rows = await everything(actor);
	return rows
		.map(
			({ position, hash, text }) => `{"position":${position},"hash":"${hash}","event":${text}}\n`,
		)
		.join('');
}

/** Every entry of the team for people: a table as RFC 4180 writes it. */
export async function asTable(actor: Actor): Promise<string> {
	demand(actor, 'administer');
	const rows = await everything(actor);
	const lines = rows.map(({ text, name }) => {
		const event = JSON.parse(text) as TrailEvent;
		const json = (value: unknown) => (value === null ? '' : JSON.stringify(value));
		const { id, at, action, subject, before, after, reason } = event;
		return [String(id), at, name ?? '', action, subject, json(before), json(after), reason ?? ''];
	});
	const head = ['id', 'when (UTC)', 'who', 'what', 'to what', 'before', 'after', 'why'];
	return [head, ...lines].map((line) => `${line.map(cell).join(',')}\r\n`).join('');
}

function everything(actor: Actor) {
	return db()
		.select({
			position: auditLink.position,
			hash: auditLink.hash,
			text: sql<string>`audit_text(${auditEvent})`,
			name: person.name,
		})
		.from(auditEvent)
		.innerJoin(auditLink, eq(auditLink.eventId, auditEvent.id))
		.leftJoin(person, eq(person.id, auditEvent.personId))
		.where(eq(auditEvent.teamId, actor.teamId))
		.orderBy(asc(auditLink.position));
}

/** A cell that no spreadsheet takes for a formula. */
function cell(text: string): string {
	const safe = /^[=+\-@\t\r]/.test(text) ? `'${text}` : text;
	return `"${safe.replaceAll('"', '""')}"`;
}
