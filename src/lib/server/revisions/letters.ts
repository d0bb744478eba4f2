/** Letters of revisions in order: the alphabet without I, O, Q, S, X and Z (ASME Y14.35). */
const alphabet = 'ABCDEFGHJKLMNPRTUVWY';

/** Letter of the nth revision, n from 1: A, B, … Y, AA, AB, … */
export function letterOf(n: number): string {
	let rest = n;
	let letters = '';
	while (rest > 0) {
		const index = (rest - 1) % alphabet.length;
		letters = alphabet.charAt(index) + letters;
		rest = (rest - 1 - index) / alphabet.length;
	}
	return letters;
}
