/** How many bands a seal has. */
const bandCount = 5;

/** Colours of the digits 0 to 9 after IEC 60062, with the shade they are drawn in. */
const digitColours = [
	{ name: 'black', shade: '#14161a' },
	{ name: 'brown', shade: '#6b3d1e' },
	{ name: 'red', shade: '#c4271b' },
	{ name: 'orange', shade: '#e8801a' },
	{ name: 'yellow', shade: '#f2c500' },
	{ name: 'green', shade: '#2f8f46' },
	{ name: 'blue', shade: '#1f6fc4' },
	{ name: 'violet', shade: '#7a3fa0' },
	{ name: 'grey', shade: '#8d8d8d' },
	{ name: 'white', shade: '#ffffff' },
] as const;

interface Band {
	digit: number;
	name: string;
	/** CSS colour. */
	shade: string;
}

/**
 * The bands of a seal: the first five decimal digits met when the hexadecimal digest is read from the left and its
 * letters are skipped, so that anyone can read them off the printed digest. `7b9c3e41…` gives 7, 9, 3, 4, 1.
 * A digest with fewer decimal digits has fewer bands.
 */
export function bandsOf(digest: string): Band[] {
	return digest
		.replace(/\D/g, '')
		.slice(0, bandCount)
		.split('')
		.map((character) => {
			const digit = Number(character);
			return { digit, ...digitColours[digit]! };
		});
}

/** The digest in groups of eight, as it is printed in full. */
export function grouped(digest: string): string {
	return digest.match(/.{1,8}/g)?.join(' ') ?? '';
}
