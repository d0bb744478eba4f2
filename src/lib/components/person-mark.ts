/** First letters of the first and the last name: "SE" of "Second Engineer". */
export function initials(name: string): string {
	const words = name.trim().split(/\s+/);
	const letters = words.length > 1 ? [words[0], words[words.length - 1]] : [words[0]];
	return letters
		.map((word) => Array.from(word ?? '')[0] ?? '')
		.join('')
		.toUpperCase();
}

/** Grounds of a person's mark; white letters have at least 4.5 : 1 on each. */
const grounds = [
	'#7a4fa3',
	'#a3562f',
	'#2f6f8f',
	'#8a3f63',
	'#4f6b2a',
	'#5a5fae',
	'#8a5a1a',
	'#336b5b',
];

/** The same person has the same colour everywhere. */
export function groundOf(personId: string): string {
	let sum = 0;
	for (const character of personId) sum = (sum * 31 + character.charCodeAt(0)) % 65_521;
	return grounds[sum % grounds.length]!;
}
