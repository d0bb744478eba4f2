import { once } from 'node:events';
import { performance } from 'node:perf_hooks';
import * as decoding from 'lib0/decoding';
import * as encoding from 'lib0/encoding';
import { writeSyncStep1, writeUpdate } from 'y-protocols/sync';
import { WebSocket } from 'ws';
import * as Y from 'yjs';
import { placedCells } from '$lib/note/document';
import { decodeJson, encodeEdit, messageType, type Saved } from '$lib/protocol/messages';

/** Where editors connect, and as whom. */
export interface Seat {
	url: string;
	headers: Record<string, string>;
}

export interface Session {
	/** One list of seats for each note. */
	notes: readonly (readonly Seat[])[];
	editsPerSecond: number;
	seconds: number;
	/** Edits of the first seconds are not measured. */
	warmSeconds?: number;
	/** A bare relay knows neither ids nor acknowledgements. */
	relay?: boolean;
	/** Also waits for the figure of each edit, everywhere. */
	figures?: boolean;
}

export interface Heard {
	edits: number;
	/** ms from sending an edit to its text at each of the others. */
	text: number[];
	/** ms from sending an edit to its acknowledgement. */
	saved: number[];
	/** ms from sending an edit to its figure at the last of all. */
	figure: number[];
	/** Edits that were not acknowledged within the time. */
	unacknowledged: number;
	/** Bytes that went to the server for all edits. */
	bytesSent: number;
}

const settleMs = 10_000;

/** Editors on notes who all type; each has a document of its own and only writes down when the texts of others come. */
export class Crowd {
	readonly #session: Session;
	readonly #editors: Editor[];
	readonly #heard: Heard = {
		edits: 0,
		text: [],
		saved: [],
		figure: [],
		unacknowledged: 0,
		bytesSent: 0,
	};

	constructor(session: Session) {
		this.#session = session;
		const rooms = session.notes.map((seats) => ({ sent: new Map(), seats: seats.length }));
		this.#editors = session.notes.flatMap((seats, note) =>
			seats.map((seat, place) => new Editor(seat, rooms[note]!, place, session)),
		);
	}

	/** Connects everybody, some at a time. */
	async open(): Promise<void> {
		const waiting = [...this.#editors];
		const connect = async () => {
			for (let editor = waiting.pop(); editor; editor = waiting.pop()) await editor.open();
		};
		await Promise.all(Array.from({ length: 20 }, connect));
	}

	async type(): Promise<Heard> {
		const { editsPerSecond, seconds, warmSeconds = 1 } = this.#session;
		const gap = 1000 / editsPerSecond;
		const from = performance.now();
		const measured = from + 1000 * warmSeconds;
		const until = measured + 1000 * seconds;
		await Promise.all(
			this.#editors.map(async (editor, index) => {
				// Spread over the gap, as people are.
				let next = from + gap * ((index * 0.618) % 1);
				for (; next < until; next += gap) {
					const wait = next - performance.now();
					if (wait > 0) await new Promise((resolve) => setTimeout(resolve, wait));
					editor.edit(next >= measured ? this.#heard : undefined);
				}
			}),
		);
		const end = performance.now() + settleMs;
		const waits = () => this.#editors.some((editor) => editor.unacknowledged > 0);
		while (waits() && performance.now() < end)
			await new Promise((resolve) => setTimeout(resolve, 20));
		this.#heard.unacknowledged = this.#editors.reduce((sum, one) => sum + one.unacknowledged, 0);
		return this.#heard;
	}

	async close(): Promise<void> {
		await Promise.all(this.#editors.map((editor) => editor.close()));
	}
}

/** An edit on its way. */
interface Sent {
	at: number;
	heard: Heard;
	/** The value that its line has after it. */
	value: number;
	name: string;
	/** Pages that do not show its figure yet. */
	missing: number;
}

/** What the editors of a note know of each other's edits: by the update's client and clock, as each receiver finds them in it. */
interface RoomLog {
	sent: Map<string, Sent>;
	seats: number;
}

class Editor {
	readonly #seat: Seat;
	readonly #room: RoomLog;
	readonly #place: number;
	readonly #session: Session;
	readonly #doc = new Y.Doc();
	readonly #unsaved = new Map<string, { at: number; heard: Heard | undefined }>();
	/** Edits of the note whose figure this one waits for, oldest first. */
	readonly #awaited = new Set<Sent>();
	#socket: WebSocket | undefined;
	#text: Y.Text | undefined;
	#count = 0;
	#onReady: () => void = () => undefined;

	constructor(seat: Seat, room: RoomLog, place: number, session: Session) {
		this.#seat = seat;
		this.#room = room;
		this.#place = place;
		this.#session = session;
	}

	get unacknowledged(): number {
		return this.#unsaved.size;
	}

	/** As pages ask: for what changed in results once they have them. */
	get #address(): string {
		return this.#session.relay ? this.#seat.url : `${this.#seat.url}?results=changes`;
	}

	async open(): Promise<void> {
		const socket = (this.#socket = new WebSocket(this.#address, {
			headers: this.#seat.headers,
			perMessageDeflate: false,
		}));
		socket.binaryType = 'nodebuffer';
		socket.on('message', (data: Buffer) => this.#onMessage(data));
		const ready = new Promise<void>((resolve, reject) => {
			this.#onReady = resolve;
			socket.once('close', (code) => reject(new Error(`a socket was closed with ${code}`)));
		});
		ready.catch(() => undefined);
		await once(socket, 'open');
		const encoder = encoding.createEncoder();
		encoding.writeVarUint(encoder, messageType.sync);
		writeSyncStep1(encoder, this.#doc);
		socket.send(encoding.toUint8Array(encoder));
		await ready;
	}

	/** Replaces the number of this editor's line, or adds a letter to its comment where no figures are waited for. */
	edit(heard: Heard | undefined): void {
		const text = this.#text;
		if (!text || this.#socket?.readyState !== WebSocket.OPEN) throw new Error('an editor is away');
		const clock = Y.getState(this.#doc.store, this.#doc.clientID);
		let update: Uint8Array = new Uint8Array(0);
		this.#doc.once('update', (bytes: Uint8Array) => (update = bytes));
		const value = this.#change(text);
		const id = `${this.#doc.clientID}-${++this.#count}`;
		const message = this.#session.relay ? relayed(update) : encodeEdit(id, update);
		const at = performance.now();
		if (!this.#session.relay) this.#unsaved.set(id, { at, heard });
		if (heard) {
			heard.edits += 1;
			heard.bytesSent += message.length;
			const { seats } = this.#room;
			const sent = { at, heard, value, name: this.#name, missing: seats };
			this.#room.sent.set(`${this.#doc.clientID}:${clock}`, sent);
			if (this.#session.figures) this.#awaited.add(sent);
		}
		this.#socket.send(message);
	}

	get #name(): string {
		return `a_${this.#place}`;
	}

	#change(text: Y.Text): number {
		const content = text.toJSON();
		if (!this.#session.figures) {
			text.insert(content.length, 'x');
			return 0;
		}
		const from = content.indexOf(`${this.#name} = `) + this.#name.length + 3;
		const to = content.indexOf(' ', from);
		const value = Number(content.slice(from, to)) + 1;
		this.#doc.transact(() => {
			text.delete(from, to - from);
			text.insert(from, String(value));
		});
		return value;
	}

	#onMessage(data: Buffer): void {
		const now = performance.now();
		const decoder = decoding.createDecoder(data);
		const type = decoding.readVarUint(decoder);
		if (type === messageType.sync) this.#onSync(decoder, now);
		else if (type === messageType.saved) {
			for (const id of decodeJson<Saved>(decoder).ids) {
				const edit = this.#unsaved.get(id);
				this.#unsaved.delete(id);
				edit?.heard?.saved.push(now - edit.at);
			}
		} else if (tellsFigures(type) && this.#session.figures) this.#onResults(data, now);
		else if (type === messageType.refused)
			throw new Error(`an edit was refused: ${data.toString()}`);
	}

	#onSync(decoder: decoding.Decoder, now: number): void {
		const step = decoding.readVarUint(decoder);
		if (step === 0) return;
		const update = decoding.readVarUint8Array(decoder);
		if (!this.#text) {
			Y.applyUpdate(this.#doc, update);
			// A bare relay's document begins empty.
			this.#text = this.#session.relay ? this.#doc.getText('t') : lastText(this.#doc);
			this.#onReady();
			return;
		}
		for (const key of keysOf(update)) {
			const sent = this.#room.sent.get(key);
			if (!sent) continue;
			sent.heard.text.push(now - sent.at);
			if (this.#session.figures) this.#awaited.add(sent);
		}
	}

	#onResults(data: Buffer, now: number): void {
		for (const sent of this.#awaited) {
			const at = data.indexOf(`"${sent.name}":{`);
			const start = data.indexOf('"value":', at) + '"value":'.length;
			const shown = Number.parseFloat(data.toString('latin1', start, start + 24));
			if (at < 0 || shown < sent.value) continue;
			this.#awaited.delete(sent);
			sent.missing -= 1;
			if (sent.missing === 0) sent.heard.figure.push(now - sent.at);
		}
	}

	async close(): Promise<void> {
		const socket = this.#socket;
		if (!socket || socket.readyState === WebSocket.CLOSED) return;
		socket.close();
		await once(socket, 'close');
		this.#doc.destroy();
	}
}

/** Results come whole at first, then what changed of them. */
function tellsFigures(type: number): boolean {
	return type === messageType.results || type === messageType.changes;
}

function relayed(update: Uint8Array): Uint8Array {
	const encoder = encoding.createEncoder();
	encoding.writeVarUint(encoder, messageType.sync);
	writeUpdate(encoder, update);
	return encoding.toUint8Array(encoder);
}

/** The text of the note's last cell. */
function lastText(doc: Y.Doc): Y.Text {
	const cell = placedCells(doc).at(-1);
	if (!cell) throw new Error('the note has no cell');
	return cell.text;
}

/** Client and first clock of each part of an update. */
function keysOf(update: Uint8Array): string[] {
	const decoder = decoding.createDecoder(update);
	const parts = decoding.readVarUint(decoder);
	if (parts !== 1)
		return Y.decodeUpdate(update).structs.map(({ id }) => `${id.client}:${id.clock}`);
	decoding.readVarUint(decoder);
	const client = decoding.readVarUint(decoder);
	return [`${client}:${decoding.readVarUint(decoder)}`];
}
