import { compute } from './figures';
import { judge, type Evidence, type Verdict } from './judge';
import { Random } from './random';
import { addressOf, type Post, type Site } from './site';
import { makeTestNote, storedView, type TestNote } from './test-note';
import { comesTrue, pause, until } from './until';
import { Writer } from './writer';

/** Longest time in ms that a service may take to serve again, once what was broken is whole. */
const recoveryMs = 10_000;

export interface Size {
	notes: number;
	writers: number;
}

/** Notes and writers for one run of a fault, and everything about them that is wrong. */
export class Stage {
	readonly site: Site;
	readonly isFull: boolean;
	readonly random: Random;
	readonly notes: TestNote[] = [];
	readonly writers: Writer[] = [];
	/** What was wrong besides what the judge finds, sentences. */
	readonly complaints = new Set<string>();
	/** Times that something was broken. */
	injected = 0;
	/** Longest time in ms until everybody could write again. */
	slowestMs = 0;
	#typing: Promise<void> | undefined;
	#stop = false;

	private constructor(site: Site, isFull: boolean, random: Random) {
		this.site = site;
		this.isFull = isFull;
		this.random = random;
	}

	static async open(site: Site, isFull: boolean, seed: number, size: Size): Promise<Stage> {
		const stage = new Stage(site, isFull, new Random(seed));
		for (let n = 0; n < size.notes; n++) stage.notes.push(await makeTestNote(site.owner));
		const opening = Array.from({ length: size.writers }, (_, n) => {
			const note = stage.notes[n % size.notes] as TestNote;
			const post = stage.postOf(Math.floor(n / size.notes));
			return Writer.open(`w${n + 1}`, note, addressOf(post), site.cookies[n] ?? '');
		});
		stage.writers.push(...(await Promise.all(opening)));
		return stage;
	}

	readonly postOf = (n: number): Post => this.site.posts[n % this.site.posts.length] as Post;

	/** Edits acknowledged so far. */
	get acknowledged(): number {
		return this.notes.reduce((sum, { ledger }) => sum + ledger.edits.size, 0);
	}

	/** Instant of the last acknowledgement, on the clock of `performance`. */
	get lastAcknowledgedAt(): number {
		return Math.max(...this.notes.map(({ ledger }) => ledger.lastAt));
	}

	/** Lets everybody type, about so often a second each, until `rest`. */
	type(perSecond: number): void {
		this.#stop = false;
		const tickMs = 5;
		const share = (perSecond * tickMs) / 1000;
		const run = async () => {
			while (!this.#stop) {
				for (const writer of this.writers) {
					if (this.random.chance(share)) writer.act(this.random);
					this.#look(writer);
				}
				await pause(tickMs);
			}
		};
		this.#typing ??= run().finally(() => (this.#typing = undefined));
	}

	async rest(): Promise<void> {
		this.#stop = true;
		await this.#typing;
	}

	/** Waits until so many more edits are acknowledged. */
	async acknowledges(count: number): Promise<void> {
		const wanted = this.acknowledged + count;
		await until(() => this.acknowledged >= wanted, 60_000, `${count} edits were not acknowledged`);
	}

	/** From now on everything is whole: measures how long it takes until everybody has written something anew. */
	async recovers(writers: readonly Writer[] = this.writers): Promise<void> {
		const from = performance.now();
		const written = writers.map((writer) => writer.append(this.random));
		const done = () => written.every(({ acknowledged }) => acknowledged);
		const came = await comesTrue(done, 60_000);
		const tookMs = performance.now() - from;
		this.slowestMs = Math.max(this.slowestMs, tookMs);
		if (!came || tookMs > recoveryMs)
			this.complain(`it took ${Math.round(tookMs)} ms to recover${came ? '' : ', and went on'}`);
	}

	/** Waits until what everybody has written by now is in every page of its note; complains where that takes too long. */
	async arrives(limitMs: number): Promise<void> {
		const written = this.writers.map((writer) => ({ writer, ...writer.append(this.random) }));
		const everywhere = () =>
			written.every(({ writer: { note }, value }) =>
				this.writers
					.filter((reader) => reader.note === note)
					.every((reader) => reader.shows(value)),
			);
		if (!(await comesTrue(everywhere, limitMs)))
			this.complain(`edits took more than ${limitMs / 1000} s to reach another process`);
	}

	complain(sentence: string): void {
		this.complaints.add(sentence);
	}

	/** Waits for everything to settle, up to so long, and gives the evidence, note by note. */
	async evidence(patienceMs = recoveryMs): Promise<Evidence[]> {
		await this.rest();
		const saved = () => this.writers.every((writer) => writer.isSaved);
		if (!(await comesTrue(saved, 30_000))) this.complain('a page was not saved at the end');
		for (const writer of this.writers) this.#look(writer);
		for (const { ledger } of this.notes)
			for (const reason of ledger.refusals) this.complain(`refused: ${reason}`);
		this.site.crashed.forEach((sentence) => this.complain(sentence));
		return Promise.all(this.notes.map((note) => this.#evidenceOf(note, patienceMs)));
	}

	destroy(): void {
		for (const writer of this.writers) writer.destroy();
	}

	/** Everybody who has the note open, and somebody new on each process. */
	async #evidenceOf(note: TestNote, patienceMs: number): Promise<Evidence> {
		const visitors = await Promise.all(
			this.site.posts.map((post, index) =>
				Writer.open(`visitor ${index + 1}`, note, addressOf(post), this.site.cookies.at(-1) ?? ''),
			),
		);
		const pages = [...this.writers.filter((writer) => writer.note === note), ...visitors];
		const gather = async (): Promise<Evidence> => {
			const stored = await storedView(note);
			return {
				operations: note.ledger.operations,
				firstPlace: note.firstPlace,
				stored,
				replicas: pages.map((page) => page.view()),
				computed: compute(stored.content),
			};
		};
		let evidence = await gather();
		// What is on its way may come in; what is lost does not come back.
		const end = performance.now() + patienceMs;
		while (!isClean(judge(evidence)) && performance.now() < end) {
			await pause(100);
			evidence = await gather();
		}
		visitors.forEach((visitor) => visitor.destroy());
		return evidence;
	}

	#look(writer: Writer): void {
		const { complaint } = writer;
		if (complaint) this.complain(complaint);
	}
}

export function isClean({ lost, doubled, phantom, diverged }: Verdict): boolean {
	return [lost, doubled, phantom, diverged].every((list) => list.length === 0);
}
