import type { Evaluation, Quantity } from '$lib/calc/results';
import type { QuantityDetail } from '$lib/schemas/quantities';
import { call } from './call';
import { Trials } from './trials.svelte';

/** Figures that go on changing, as while somebody types, are asked for when they stood still this long. */
const settledMs = 120;
/** An answer that is older than the page's figures is asked for again, this often at most. */
const mostTries = 12;

/** What can be asked of a line beside what is known of it. */
interface Asks {
	/** Tries another value of the quantity. */
	trial: (name: string) => void;
	/** Draws what the quantity is computed from and goes into. */
	picture: (name: string) => void;
	/** Chooses unit and digits of its readouts, beside an element; undefined where nothing may be written. */
	setting: ((name: string, at: Element) => void) | undefined;
}

/** The worked line that is open on the sheet, and what the server says of its quantity. */
export class OpenLine {
	readonly trials: Trials;
	readonly asks: Asks;
	readonly #address: string;
	#opened = $state<string>();
	#detail = $state.raw<QuantityDetail>();
	#failure = $state<string>();
	#valueless = $state(false);
	#quantity: Quantity | undefined;
	#evaluation = $state.raw<Evaluation>();
	#timer: ReturnType<typeof setTimeout> | undefined;
	#reading: Promise<void> | undefined;
	#wanted = 0;

	/** `number` as in addresses, MN-014. */
	constructor(number: string, asks: Asks) {
		this.asks = asks;
		this.#address = `/api/notes/${number}/quantities`;
		this.trials = new Trials(`/api/notes/${number}/trials`);
	}

	/** Name of the quantity whose line is open. */
	get opened(): string | undefined {
		return this.#opened;
	}
	/** What is known; the last answer until a newer one is there. */
	get detail(): QuantityDetail | undefined {
		return this.#detail;
	}
	/** Its line has no value at the moment, so that what is known is of before. */
	get valueless(): boolean {
		return this.#valueless;
	}
	/** Why nothing newer is known, a sentence. */
	get failure(): string | undefined {
		return this.#failure;
	}

	/** A quantity of the note by its name. */
	quantityOf(name: string): Quantity | undefined {
		const { quantities = {} } = this.#evaluation ?? {};
		return Object.hasOwn(quantities, name) ? quantities[name] : undefined;
	}

	toggle(name: string): void {
		if (this.#opened === name) return this.close();
		this.close();
		this.#opened = name;
		this.#see();
		void this.#ask();
	}

	close(): void {
		clearTimeout(this.#timer);
		this.trials.forget();
		this.#wanted = 0;
		this.#opened = undefined;
		this.#detail = undefined;
		this.#failure = undefined;
		this.#quantity = undefined;
	}

	/** Takes note of new results; asks anew where a line is open. */
	follow(evaluation: Evaluation): void {
		this.#evaluation = evaluation;
		if (this.#opened === undefined) return;
		this.#see();
		clearTimeout(this.#timer);
		if (!this.#valueless) this.#timer = setTimeout(() => void this.#ask(), settledMs);
	}

	#see(): void {
		const quantity = this.quantityOf(this.#opened ?? '');
		this.#valueless = quantity === undefined;
		if (!quantity) return;
		if (this.#quantity && !sameFigures(this.#quantity, quantity)) this.trials.forget();
		this.#quantity = quantity;
	}

	async #ask(): Promise<void> {
		this.#wanted = mostTries;
		this.#reading ??= this.#read();
		await this.#reading;
	}

	async #read(): Promise<void> {
		while (this.#wanted > 0) {
			this.#wanted -= 1;
			const name = this.#opened;
			if (name === undefined) break;
			try {
				const detail = await call<QuantityDetail>(
					'GET',
					`${this.#address}/${encodeURIComponent(name)}`,
				);
				if (this.#opened !== name) continue;
				this.#detail = detail;
				this.#failure = undefined;
				// The page hears of results before they are stored.
				if (!this.#quantity || sameFigures(detail.quantity, this.#quantity)) break;
			} catch (error) {
				if (this.#opened === name) this.#failure = (error as Error).message;
				break;
			}
			await new Promise((resolve) => setTimeout(resolve, settledMs));
		}
		this.#wanted = 0;
		this.#reading = undefined;
	}
}

function sameFigures(a: Quantity, b: Quantity): boolean {
	return (
		a.text === b.text &&
		a.value === b.value &&
		a.expandedUncertainty === b.expandedUncertainty &&
		a.description === b.description
	);
}
