import fc from 'fast-check';
import { afterEach, expect, test, vi } from 'vitest';
import { addCell, placedCells } from '$lib/note/document';
import * as Y from 'yjs';
import { undoManagerOf } from './undo';

afterEach(() => vi.useRealTimers());

/** Two people on one text. Each character is unlike every other, so that a text tells who did what. */
class Pair {
	readonly #docs = [new Y.Doc(), new Y.Doc()] as const;
	readonly #managers: Y.UndoManager[];
	readonly #inbox: Uint8Array[][] = [[], []];
	#next = 0xe000;
	/** Who inserted a character. */
	readonly author = new Map<string, number>();
	/** Who took a character away, by typing. */
	readonly takers = new Map<string, Set<number>>();

	constructor() {
		const [first, second] = this.#docs;
		// Client ids decide ties; the same run is to give the same text.
		first.clientID = 1;
		second.clientID = 2;
		addCell(first, 'text', null);
		Y.applyUpdate(second, Y.encodeStateAsUpdate(first));
		this.#managers = this.#docs.map((doc, who) => undoManagerOf(doc, `person ${who}`));
		this.#docs.forEach((doc, who) =>
			doc.on('update', (update: Uint8Array, origin: unknown) => {
				if (origin !== 'network') this.#inbox[1 - who]!.push(update);
			}),
		);
	}

	textOf(who: number): string {
		return this.#text(who).toJSON();
	}

	insert(who: number, place: number, count: number): void {
		const characters = Array.from({ length: count }, () => String.fromCharCode(this.#next++));
		for (const character of characters) this.author.set(character, who);
		this.#change(who, (text) => text.insert(scale(place, text.length + 1), characters.join('')));
	}

	remove(who: number, place: number, count: number): void {
		this.#change(who, (text) => {
			if (text.length === 0) return;
			const at = scale(place, text.length);
			const gone = text.toJSON().slice(at, at + count);
			for (const character of gone) {
				const takers = this.takers.get(character) ?? new Set();
				this.takers.set(character, takers.add(who));
			}
			text.delete(at, gone.length);
		});
	}

	undo(who: number): boolean {
		return this.#managers[who]!.undo() !== null;
	}

	redo(who: number): boolean {
		return this.#managers[who]!.redo() !== null;
	}

	/** What the other one did arrives here. */
	receive(who: number): void {
		for (const update of this.#inbox[who]!.splice(0)) {
			Y.applyUpdate(this.#docs[who]!, update, 'network');
		}
	}

	#text(who: number): Y.Text {
		return placedCells(this.#docs[who]!)[0]!.text;
	}

	#change(who: number, change: (text: Y.Text) => void): void {
		this.#docs[who]!.transact(() => change(this.#text(who)), `person ${who}`);
	}
}

const copies = (text: string, character: string) => text.split(character).length - 1;
const scale = (place: number, length: number) => Math.floor(place * length) % length;

const who = fc.constantFrom(0, 1);
const place = fc.double({ min: 0, max: 0.999, noNaN: true });
const deed = fc.oneof(
	{
		weight: 5,
		arbitrary: fc.record({ kind: fc.constant('insert'), who, place, count: fc.nat(3) }),
	},
	{
		weight: 3,
		arbitrary: fc.record({ kind: fc.constant('remove'), who, place, count: fc.nat(4) }),
	},
	{ weight: 3, arbitrary: fc.record({ kind: fc.constantFrom('undo', 'redo', 'receive'), who }) },
	// Within half a second changes are undone together, after it apart.
	{ weight: 2, arbitrary: fc.record({ kind: fc.constantFrom('pause', 'moment'), who }) },
);

const runs = Number(process.env.UNDO_RUNS ?? 300);

test(`undo and redo touch only what the person did, whatever the other does (${runs} runs)`, () => {
	vi.useFakeTimers({ toFake: ['Date'] });
	fc.assert(
		fc.property(fc.array(deed, { minLength: 5, maxLength: 40 }), (deeds) => {
			const pair = new Pair();
			/** Who brought a character back. */
			const restorers = new Map<string, Set<number>>();
			const step = (person: number, verb: 'undo' | 'redo') => {
				const before = pair.textOf(person);
				const done = pair[verb](person);
				const after = pair.textOf(person);
				for (const character of before) {
					if (copies(after, character) >= copies(before, character)) continue;
					// What vanishes is this person's, or this person had taken it away before and does so anew.
					const own = pair.author.get(character) === person;
					const again = verb === 'redo' && pair.takers.get(character)?.has(person);
					expect(own || again).toBe(true);
				}
				for (const character of after) {
					if (copies(after, character) <= copies(before, character)) continue;
					const taken = pair.takers.get(character)?.has(person);
					const again = verb === 'redo' && pair.author.get(character) === person;
					expect(taken === true || again).toBe(true);
					restorers.set(character, (restorers.get(character) ?? new Set()).add(person));
				}
				const alone = (text: string, other: string) =>
					[...text].filter((one) => copies(text, one) === 1 && copies(other, one) === 1).join('');
				expect(alone(after, before)).toBe(alone(before, after));
				for (const character of after) {
					// Two who bring one character back without knowing of each other both do, as if they typed it.
					const most = Math.max(1, restorers.get(character)?.size ?? 0);
					expect(copies(after, character)).toBeLessThanOrEqual(most);
				}
				return done;
			};
			for (const one of deeds) {
				if (one.kind === 'pause') vi.advanceTimersByTime(600);
				else if (one.kind === 'moment') vi.advanceTimersByTime(100);
				else if (one.kind === 'receive') pair.receive(one.who);
				else if (one.kind === 'undo' || one.kind === 'redo') step(one.who, one.kind);
				else if ('place' in one) pair[one.kind](one.who, one.place, one.count);
			}
			for (const person of [0, 1]) pair.receive(person);
			expect(pair.textOf(0)).toBe(pair.textOf(1));

			// One of them undoes everything: what the other wrote and left stands, and all that is there is the other's.
			vi.advanceTimersByTime(600);
			const theirs = [...pair.textOf(0)].filter((character) => pair.author.get(character) === 1);
			while (step(0, 'undo'));
			pair.receive(1);
			const left = pair.textOf(1);
			expect(pair.textOf(0)).toBe(left);
			for (const character of theirs) expect(left).toContain(character);
			for (const character of left) {
				const restored = pair.takers.get(character)?.has(1);
				expect(pair.author.get(character) === 1 || restored === true).toBe(true);
			}
		}),
		{ numRuns: runs, seed: Number(process.env.UNDO_SEED ?? 5) },
	);
});

test('what one undoes within what another has typed around it leaves the other’s words in order', () => {
	const pair = new Pair();
	pair.insert(0, 0, 4);
	pair.receive(1);
	pair.insert(1, 0.5, 3);
	pair.receive(0);
	pair.undo(0);
	pair.receive(1);
	expect([...pair.textOf(1)].map((character) => pair.author.get(character))).toEqual([1, 1, 1]);
	pair.redo(0);
	pair.receive(1);
	const authors = [...pair.textOf(1)].map((character) => pair.author.get(character));
	expect(authors.filter((author) => author === 1)).toHaveLength(3);
	expect(authors.filter((author) => author === 0)).toHaveLength(4);
});
