import { expect, test } from 'vitest';
import * as Y from 'yjs';
import { placedCells, seedContent, toContent } from './document';
import { replacePlaces } from './replace-places';

test('places are rewritten exactly, and what another one types beside them at that time stays', () => {
	const doc = new Y.Doc();
	seedContent(doc, {
		title: '',
		cells: [
			{ kind: 'calculation', source: 'R1 = 1 kohm\ny = R1 * 2' },
			{ kind: 'text', source: 'about {{R1}}' },
		],
	});
	const [first, second] = [placedCells(doc)[0]!, placedCells(doc)[1]!];
	const peer = new Y.Doc();
	Y.applyUpdate(peer, Y.encodeStateAsUpdate(doc));
	placedCells(peer)[0]!.text.insert(11, ' # upper');
	placedCells(peer)[0]!.text.insert(0, 'x = 1\n');

	const at = (cellId: string, from: number) => ({ cellId, from, to: from + 2 });
	const places = [at(first.id, 0), at(first.id, 16), at(second.id, 8), at(second.id, 1)];
	expect(replacePlaces(doc, places, 'R_top', (found) => found === 'R1')).toBe(3);
	Y.applyUpdate(peer, Y.encodeStateAsUpdate(doc));
	Y.applyUpdate(doc, Y.encodeStateAsUpdate(peer));
	for (const each of [doc, peer])
		expect(toContent(each).cells.map(({ source }) => source)).toEqual([
			'x = 1\nR_top = 1 kohm # upper\ny = R_top * 2',
			'about {{R_top}}',
		]);
});
