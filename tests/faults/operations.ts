/** Something a client wrote, and what became of it. */
export interface Operation {
	client: string;
	/**
	 * `append`: a token that nothing removes. `line`: the number of the client's own line, which replaces its last one.
	 * `place`: the order key of the cell that everybody moves.
	 */
	kind: 'append' | 'line' | 'place';
	value: string;
	/** What the write replaced. */
	over: string | undefined;
	acknowledged: boolean;
}

export const tokenOf = (client: string, count: number) => `${client}.${count};`;
export const tokens = /[a-z]+\d+\.\d+;/g;

/** The worked line of a client. */
export const lineOf = (client: string, value: string) => `${client} = ${value} V\n`;
export const lines = /^([a-z0-9]+) = (\d+) V$/;
/** First line of the calculation, written when the note is made. */
export const firstLine = 'U = 5 V\n';
