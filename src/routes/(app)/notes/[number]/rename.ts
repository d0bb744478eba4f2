import { canonical } from '$lib/calc/language/characters';
import { usesOf } from '$lib/editor/uses';
import { unitOf, vocabulary } from '$lib/editor/vocabulary';
import { replacePlaces } from '$lib/note/replace-places';
import { renameShown } from '$lib/note/shown';
import type { Sheet } from './sheet.svelte';

/** Gives a quantity another name wherever the note has it, as one step, and tells in how many places that was. */
export async function rename(sheet: Sheet, name: string, next: string): Promise<void> {
	const words = await vocabulary();
	const { copy } = sheet;
	const places = usesOf(copy.cells, name, (typed) => unitOf(words, typed) !== undefined);
	const isName = (found: string) => canonical(found) === canonical(name);
	const count =
		copy.change((doc) => {
			renameShown(doc, name, next);
			return replacePlaces(doc, places, next, isName);
		}) ?? 0;
	sheet.told = `${name} is ${next} now, in ${count} place${count === 1 ? '' : 's'}.`;
}
