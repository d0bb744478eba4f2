import { createContext, type Snippet } from 'svelte';

/** The place at the right of the header where the page that is open shows its state. */
export class HeaderPlace {
	#content = $state.raw<Snippet>();

	get content(): Snippet | undefined {
		return this.#content;
	}

	/** Shows a snippet until the returned function is called. */
	show(content: Snippet): () => void {
		this.#content = content;
		return () => {
			if (this.#content === content) this.#content = undefined;
		};
	}
}

export const [getHeaderPlace, setHeaderPlace] = createContext<HeaderPlace>();
