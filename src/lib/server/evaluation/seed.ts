/** A note's own seed, so that whoever draws its trials gets the same. */
export function seedOf(noteId: string): number {
	return parseInt(noteId.slice(0, 8), 16);
}
