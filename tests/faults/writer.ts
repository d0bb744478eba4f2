import * as Y from 'yjs';
import { cellsOf } from '$lib/note/document';
import type { WorkingCopy } from '$lib/client/working-copy.svelte';
import { connectPage, contentOf, type } from '../support/page';
import { runBy, type Clock } from './clock';
import { figuresOf } from './figures';
import type { View } from './judge';
import { lineOf, tokenOf, type Operation } from './operations';
import type { Random } from './random';
import { spySocket, type Disturbance } from './spy-socket';
import type { TestNote } from './test-note';
import { until } from './until';

/** Edits on the way at which a writer waits, so that what it writes next does not travel together with other edits. */
const mostOnTheWay = 40;

/** A person with a page of the product's own open, who writes what the judge can recognise. */
export class Writer {
	readonly name: string;
	readonly note: TestNote;
	readonly clock: Clock = { offMs: 0 };
	disturbance: Disturbance | undefined;
	readonly #url: string;
	readonly #cookie: string;
	#page: WorkingCopy | undefined;
	/** Written in the page that is open, and not acknowledged when last looked at. */
	#open: Operation[] = [];
	#pages = 0;
	#count = 0;

	private constructor(name: string, note: TestNote, url: string, cookie: string) {
		this.name = name;
		this.note = note;
		this.#url = url;
		this.#cookie = cookie;
	}

	static async open(name: string, note: TestNote, url: string, cookie: string): Promise<Writer> {
		const writer = new Writer(name, note, url, cookie);
		await writer.load();
		return writer;
	}

	get page(): WorkingCopy {
		if (!this.#page) throw new Error('this writer has no page');
		return this.#page;
	}

	/** Opens the page, again where one is open; what that had not sent is gone. */
	async load(): Promise<void> {
		this.#page?.destroy();
		this.#open = [];
		this.#pages += 1;
		const { id: noteId, epoch, ledger } = this.note;
		const Socket = spySocket(ledger, () => this.disturbance);
		const page = await runBy(this.clock, () =>
			connectPage({ url: this.#url }, { noteId, epoch, cookie: this.#cookie, Socket }),
		);
		this.#page = page;
		await until(() => page.ready, 30_000, `the page of ${this.name} was not complete`);
	}

	/** Whether the page has nothing on the way. */
	get isSaved(): boolean {
		return this.page.saving.state === 'saved' && this.page.saving.count === 0;
	}

	/** What is wrong with what the page says of itself. */
	get complaint(): string | undefined {
		const { saving, connection, notice } = this.page;
		if (connection === 'closed') return `${this.name} was closed: ${notice}`;
		if (saving.state === 'refused') return `${this.name} was refused: ${saving.reason}`;
		this.#open = this.#open.filter(({ acknowledged }) => !acknowledged);
		const count = this.#open.length;
		if (saving.state === 'saved' && count > 0)
			return `${this.name} was told "saved" with ${count} edits that were not`;
		return undefined;
	}

	/** Writes something, unless much is on the way already. */
	act(random: Random): void {
		if (!this.page.editable || this.page.saving.count >= mostOnTheWay) return;
		const draw = random.next();
		if (draw < 0.85) this.append(random);
		else if (draw < 0.95) this.writeLine();
		else this.move(random);
	}

	append(random: Random): Operation {
		const value = tokenOf(this.name, (this.#count += 1));
		const cell = random.pick(this.note.texts);
		const what = { client: this.name, kind: 'append', value, over: undefined } as const;
		return this.#do(what, () => type(this.page, cell, value));
	}

	/**
	 * Puts a new number into the page's own line of the calculation. A page that was loaded again has another line: what
	 * the earlier one had sent may still come in beside it.
	 */
	writeLine(): void {
		const name = `${this.name.replace(/\d+/, '')}p${this.#pages}n${this.name.replace(/\D+/, '')}`;
		const text = this.page.textOf(this.note.calculation);
		if (!text) throw new Error('the calculation is gone');
		const value = String((this.#count += 1));
		const before = new RegExp(`^${name} = (\\d+) V$`, 'm').exec(text.toJSON());
		this.#do({ client: name, kind: 'line', value, over: before?.[1] }, () => {
			if (!before) return text.insert(text.length, lineOf(name, value));
			const at = before.index + `${name} = `.length;
			this.page.doc.transact(() => {
				text.delete(at, before[1]?.length ?? 0);
				text.insert(at, value);
			});
		});
	}

	/** Moves the cell that everybody moves. */
	move(random: Random): void {
		const over = this.place;
		const after = random.pick([null, ...this.note.texts]);
		const what = { client: this.name, kind: 'place', value: '', over } as const;
		const operation = this.#do(what, () => this.page.moveCell(this.note.moved, after));
		operation.value = this.place ?? '';
	}

	/** Order key of the cell that everybody moves. */
	get place(): string | undefined {
		return placeIn(this.page.doc, this.note.moved);
	}

	/** Whether the page shows this token. */
	shows(token: string): boolean {
		return this.note.texts.some((cell) => this.page.textOf(cell)?.toJSON().includes(token));
	}

	view(): View {
		return {
			name: this.name,
			content: contentOf(this.page),
			place: this.place,
			figures: figuresOf(this.page.evaluation),
		};
	}

	destroy(): void {
		this.#page?.destroy();
		this.#page = undefined;
	}

	#do(what: Omit<Operation, 'acknowledged'>, write: () => void): Operation {
		const { doc } = this.page;
		const operation: Operation = { ...what, acknowledged: false };
		const from = Y.getState(doc.store, doc.clientID);
		runBy(this.clock, write);
		const to = Y.getState(doc.store, doc.clientID);
		if (to === from) throw new Error(`${this.name} could not write ${what.kind}`);
		this.#open.push(operation);
		this.note.ledger.wrote(operation, { client: doc.clientID, from, to });
		return operation;
	}
}

export function placeIn(doc: Y.Doc, cellId: string): string | undefined {
	return cellsOf(doc).get(cellId)?.get('order') as string | undefined;
}
