import type { Actor } from '$lib/server/auth/access';
import * as evaluations from '$lib/server/evaluation/store';
import { toContent } from '$lib/note/document';
import * as notes from '$lib/server/notes/notes';
import { loadDocument } from '$lib/server/notes/updates';
import { figuresOf } from './figures';
import type { View } from './judge';
import { Ledger } from './ledger';
import { firstLine } from './operations';
import { placeIn } from './writer';

/** A note made for the judge, with the ledger of everything written in it. */
export interface TestNote {
	id: string;
	epoch: string;
	/** Ids of the text cells that tokens are appended to. */
	texts: string[];
	/** Id of the cell with the worked lines. */
	calculation: string;
	/** Id of the cell that everybody moves. */
	moved: string;
	firstPlace: string | undefined;
	ledger: Ledger;
}

export async function makeTestNote(owner: Actor): Promise<TestNote> {
	const text = { kind: 'text' as const, source: '' };
	const calculation = { kind: 'calculation' as const, source: firstLine };
	const cells = [text, text, text, calculation, text];
	const { id } = await notes.create(owner, { title: 'Divider', cells });
	const { doc, epoch } = await loadDocument(id);
	const ids = toContent(doc).cells.map((cell) => cell.id);
	const moved = ids[4] ?? '';
	const firstPlace = placeIn(doc, moved);
	doc.destroy();
	const texts = ids.slice(0, 3);
	return { id, epoch, texts, calculation: ids[3] ?? '', moved, firstPlace, ledger: new Ledger() };
}

/** What the database holds of a note. */
export async function storedView({ id, moved }: TestNote): Promise<View> {
	const [{ doc, pending }, stored] = await Promise.all([loadDocument(id), evaluations.find(id)]);
	// Results are not kept while an edit waits for others, as one that was garbled may for good; who asks has them computed.
	const results = pending ? (await evaluations.current(id)).results : stored?.results;
	const view: View = {
		name: 'the database',
		content: toContent(doc),
		place: placeIn(doc, moved),
		figures: results ? figuresOf(results) : { quantities: {}, errors: [] },
	};
	doc.destroy();
	return view;
}
