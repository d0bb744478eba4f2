/** White letters have at least 4.5 : 1 on each, and each at least 3 : 1 on sheet and bench, light and dark. */
const colours = [
	'#885eb1',
	'#ab5a31',
	'#33779a',
	'#af507d',
	'#5a7930',
	'#656ab3',
	'#9b651d',
	'#3b7c69',
] as const;

/** CSS colour of a person's mark and cursor: the same everywhere. */
export function personColour(personId: string): string {
	let sum = 0;
	for (const character of personId) sum = (sum * 31 + character.charCodeAt(0)) % 65_521;
	return colours[sum % colours.length]!;
}
