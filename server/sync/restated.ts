import * as Y from 'yjs';

type Struct = ReturnType<typeof Y.decodeUpdate>['structs'][number];
type Part = Y.AbstractStruct | Struct;

/**
 * Whether an update says something else than the document about what a client wrote before. Yjs would keep what it
 * has and drop the other, so that two copies differ for good while both count as complete. Content that one
 * of the two sides has thrown away, because it was deleted, cannot be compared.
 */
export function contradicts(doc: Y.Doc, structs: readonly Struct[]): boolean {
	return structs.some((struct) => struct instanceof Y.Item && differs(doc, struct));
}

function differs(doc: Y.Doc, item: Y.Item): boolean {
	const { client, clock } = item.id;
	const known = doc.store.clients.get(client);
	const end = Math.min(clock + item.length, Y.getState(doc.store, client));
	if (!known || clock >= end) return false;
	let index = Y.findIndexSS(known, clock);
	for (let from = clock; from < end; index += 1) {
		const other = known[index];
		if (!other) return true;
		const to = Math.min(end, other.id.clock + other.length);
		if (other instanceof Y.Item && !isSame(item, other, from, to)) return true;
		from = to;
	}
	return false;
}

function isSame(item: Y.Item, other: Y.Item, from: number, to: number): boolean {
	if (isGone(item) || isGone(other)) return true;
	return (
		valueOf(item, from, to) === valueOf(other, from, to) &&
		name(originAt(item, from)) === name(originAt(other, from)) &&
		name(item.rightOrigin) === name(other.rightOrigin) &&
		isSamePlace(item, other)
	);
}

const isGone = (item: Y.Item) => item.content instanceof Y.ContentDeleted;
const name = (id: Y.ID | null) => (id ? `${id.client}/${id.clock}` : '');

/** What stood to the left of the unit at a clock. */
function originAt(item: Y.Item, clock: number): Y.ID | null {
	return clock === item.id.clock ? item.origin : Y.createID(item.id.client, clock - 1);
}

/** An item names its place only where it has no neighbour that does. */
function isSamePlace(item: Y.Item, other: Y.Item): boolean {
	if (item.origin || item.rightOrigin) return true;
	return item.parentSub === other.parentSub && parentOf(item) === parentOf(other);
}

function parentOf({ parent }: Y.Item): string {
	if (parent === null || typeof parent === 'string') return `root ${parent}`;
	if (parent instanceof Y.ID) return name(parent);
	return parent._item ? name(parent._item.id) : `root ${Y.findRootTypeKey(parent)}`;
}

/** The content between two clocks, in words that are equal where it is. */
function valueOf({ id, content }: Y.Item, from: number, to: number): string {
	const [start, end] = [from - id.clock, to - id.clock];
	// A pair of surrogates that was parted is two replacement characters in one copy and whole in the other.
	if (content instanceof Y.ContentString)
		return `text ${content.str.slice(start, end).replace(/[\ud800-\udfff]/g, '\ufffd')}`;
	if (content instanceof Y.ContentAny)
		return `any ${JSON.stringify(content.arr.slice(start, end))}`;
	if (content instanceof Y.ContentFormat)
		return `format ${content.key} ${JSON.stringify(content.value)}`;
	if (content instanceof Y.ContentType) return `type ${content.type.constructor.name}`;
	return `other ${content.getRef()} ${JSON.stringify(content.getContent().slice(start, end))}`;
}

/** Client ids under which an update brings what the document does not have. */
export function bringsFrom(doc: Y.Doc, structs: readonly Part[]): Set<number> {
	const clients = new Set<number>();
	for (const struct of structs) {
		if (struct instanceof Y.Skip) continue;
		const { client, clock } = struct.id;
		if (clock + struct.length > Y.getState(doc.store, client)) clients.add(client);
	}
	return clients;
}
