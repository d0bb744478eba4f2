/** Where figures are printed. */
export interface Source {
	document: string;
	edition: string;
	locator: string;
}

/** A printed figure held against what the engine computes from lines of the language. */
export interface Row {
	what: string;
	/** '1' for a pure number or a word. */
	unit: string;
	/** Printed digits or word; null where only a recomputation is at hand. */
	published: string | null;
	/** The unrounded figure, computed from the published inputs by another way. */
	recomputed?: number | string;
	computed: number | string;
	/** What `computed` is held against and how closely, a few words. */
	rule: string;
	/** `computed` less what it is held against; absent for words and bounds. */
	difference?: number;
	agrees: boolean;
	/** Formula of the figure, where it is one of its own. */
	formula?: string;
	/** How the printed figure is known: seen in the source, recomputed, from memory. */
	confirmed: string;
	note?: string;
}

/** A published case with its figures recomputed. */
export interface Proof {
	id: string;
	title: string;
	source: Source;
	note?: string;
	/** Lines of the language that state the case, and a sentence for readings and curves. */
	lines: string[];
	rows: Row[];
}
