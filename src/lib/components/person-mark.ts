/** First letters of the first and the last name: "SE" of "Second Engineer". */
export function initials(name: string): string {
	const words = name.trim().split(/\s+/);
	const letters = words.length > 1 ? [words[0], words[words.length - 1]] : [words[0]];
	return letters
		.map((word) => Array.from(word ?? '')[0] ?? '')
		.join('')
		.toUpperCase();
}
