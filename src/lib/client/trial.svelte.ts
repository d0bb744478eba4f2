import type { MovedQuantity, MovedRequirement } from '$lib/calc/moved';
import type { Sweep } from '$lib/calc/results';
import type { KeptTrial, TrialAnswer, TrialChange, TrialRanges } from '$lib/schemas/trial';
import { call } from './call';

/** Time between two questions at least, so that a slider asks thirty times a second at most. */
const paceMs = 33;

const nothing: TrialAnswer = {
	quantities: [],
	requirements: [],
	figures: [],
	faults: [],
	sweeps: [],
	gone: [],
};

/** Inputs that a person changes privately, and what the server says that this moves. The note stays as it is. */
export class Trial {
	readonly #address: string;
	readonly #keptAddress: string;
	#isOpen = $state(false);
	#title = $state<string>();
	#changes = $state.raw<readonly TrialChange[]>([]);
	#answer = $state.raw<TrialAnswer>(nothing);
	#failure = $state<string>();
	#ranges = $state.raw<TrialRanges>({});
	#kept = $state.raw<readonly KeptTrial[]>([]);
	#wanted = $state(false);
	#asking: Promise<void> | undefined;
	/** Counts beginnings and ends; an answer to an earlier trial counts for nothing. */
	#era = 0;
	readonly #byName = $derived(new Map(this.#answer.quantities.map((one) => [one.name, one])));
	readonly #byPlace = $derived(
		new Map(this.#answer.requirements.map((one) => [`${one.cell} ${one.line}`, one])),
	);

	/** `number` as in addresses, MN-014. */
	constructor(number: string) {
		this.#address = `/api/notes/${number}/trial`;
		this.#keptAddress = `/api/notes/${number}/kept-trials`;
	}

	get isOpen(): boolean {
		return this.#isOpen;
	}
	/** What the person calls it, where it was kept. */
	get title(): string | undefined {
		return this.#title;
	}
	get changes(): readonly TrialChange[] {
		return this.#changes;
	}
	/** Those that say something else than the note. */
	get changed(): readonly TrialChange[] {
		return this.#changes.filter(({ from, to }) => from !== to);
	}
	/** What it moves; the last answer until a newer one is there. */
	get answer(): TrialAnswer {
		return this.#answer;
	}
	/** Why there is no newer answer, a sentence. */
	get failure(): string | undefined {
		return this.#failure;
	}
	/** Whether an answer is awaited. */
	get isBusy(): boolean {
		return this.#wanted;
	}
	/** Between which values inputs in doubt lie, by name. */
	get ranges(): TrialRanges {
		return this.#ranges;
	}
	/** Trials of the note that this person keeps. */
	get kept(): readonly KeptTrial[] {
		return this.#kept;
	}

	/** What the trial makes of a quantity; undefined where it leaves it as it is. */
	ofQuantity(name: string | undefined): MovedQuantity | undefined {
		return name === undefined ? undefined : this.#byName.get(name);
	}

	/** The same of a requirement. */
	ofRequirement(cell: string, line: number): MovedRequirement | undefined {
		return this.#byPlace.get(`${cell} ${line}`);
	}

	/** The curve of a cell as the trial makes it. */
	sweepOf(cell: string): Sweep | undefined {
		return this.#answer.sweeps.find((sweep) => sweep.cell === cell);
	}

	changeOf(name: string): TrialChange | undefined {
		return this.#changes.find((change) => change.name === name);
	}

	/** Opens a trial with these changes in place of what was tried before. */
	begin(changes: readonly TrialChange[] = [], title?: string): void {
		this.#era += 1;
		const wasOpen = this.#isOpen;
		this.#isOpen = true;
		this.#title = title;
		this.#changes = changes;
		this.#answer = nothing;
		this.#failure = undefined;
		void this.ask();
		if (!wasOpen) void this.#read();
	}

	/** Changes a quantity, or gives it another formula; it is no change where that is the formula it has. */
	set(change: TrialChange): void {
		const others = this.#changes.filter(({ name }) => name !== change.name);
		const isKnown = others.length < this.#changes.length;
		this.#changes = isKnown
			? this.#changes.map((each) => (each.name === change.name ? change : each))
			: [...this.#changes, change];
		void this.ask();
	}

	/** Gives a quantity back what the note says. */
	drop(name: string): void {
		this.#changes = this.#changes.filter((change) => change.name !== name);
		void this.ask();
	}

	close(): void {
		this.#era += 1;
		this.#isOpen = false;
		this.#title = undefined;
		this.#changes = [];
		this.#answer = nothing;
		this.#failure = undefined;
	}

	/** Asks what the trial moves now. While an answer is awaited only the newest question is kept. */
	async ask(): Promise<void> {
		if (!this.#isOpen) return;
		this.#wanted = true;
		this.#asking ??= this.#ask();
		await this.#asking;
	}

	/** Keeps the trial under a name. Throws an Error with a sentence. */
	async keep(title: string): Promise<void> {
		const body = { title, changes: this.changed };
		const made = await call<KeptTrial>('POST', this.#keptAddress, body);
		this.#kept = [...this.#kept, made];
		this.#title = made.title;
	}

	/** Deletes a kept trial; one that is open stays open. Throws an Error with a sentence. */
	async remove(id: string): Promise<void> {
		await call('DELETE', `${this.#keptAddress}/${id}`);
		this.#kept = this.#kept.filter((kept) => kept.id !== id);
	}

	async #read(): Promise<void> {
		const of = <T>(address: string) => call<T>('GET', address);
		try {
			const [ranges, kept] = await Promise.all([
				of<TrialRanges>(this.#address),
				of<KeptTrial[]>(this.#keptAddress),
			]);
			this.#ranges = ranges;
			this.#kept = kept;
		} catch (error) {
			this.#failure = (error as Error).message;
		}
	}

	async #ask(): Promise<void> {
		// One turn later, so that the promise is known before it can be over.
		await Promise.resolve();
		while (this.#wanted && this.#isOpen) {
			this.#wanted = false;
			const [era, changes, from] = [this.#era, this.#changes, performance.now()];
			const found = changes.length === 0 ? nothing : await this.#evaluate(changes);
			if (era === this.#era) {
				if (typeof found === 'string') this.#failure = found;
				else [this.#answer, this.#failure] = [found, undefined];
			}
			const rest = paceMs - (performance.now() - from);
			if (changes.length > 0 && rest > 0) {
				await new Promise((resolve) => setTimeout(resolve, rest));
			}
		}
		this.#wanted = false;
		this.#asking = undefined;
	}

	async #evaluate(changes: readonly TrialChange[]): Promise<TrialAnswer | string> {
		try {
			return await call<TrialAnswer>('POST', this.#address, { changes });
		} catch (error) {
			return (error as Error).message;
		}
	}
}
