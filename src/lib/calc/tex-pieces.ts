/** A piece of a formula as TeX, and how tightly it holds together. */
export interface Piece {
	tex: string;
	/** One of `level`. */
	level: number;
}

/** Pieces of a lower level stand in brackets inside one of a higher level. */
export const level = {
	choice: 0,
	convert: 1,
	range: 2,
	or: 3,
	and: 4,
	compare: 5,
	sum: 6,
	product: 7,
	sign: 8,
	/** A number with its unit: no brackets in a product, but before an exponent. */
	quantity: 9,
	fraction: 9,
	power: 10,
	atom: 11,
} as const;

/** The piece, in brackets where it does not hold together as tightly as its surroundings. */
export function within({ tex, level: own }: Piece, least: number): string {
	return own < least ? bracketed(tex) : tex;
}

export function bracketed(tex: string): string {
	return `\\left(${tex}\\right)`;
}
