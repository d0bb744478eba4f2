import { expect, test } from 'vitest';
import * as Y from 'yjs';
import { undoManagerOf } from '$lib/client/undo';
import { matchContent, seedContent, toContent } from './document';
import { countStrange, strangenessOf } from './shape';
import { setShown, shownOf } from './shown';

function noteOf() {
	const doc = new Y.Doc();
	seedContent(doc, { title: 't', cells: [{ kind: 'calculation', source: 'Vin = 1 V' }] });
	return doc;
}

test('how readouts are set is part of the content where somebody chose it, and only then', () => {
	const doc = noteOf();
	expect(toContent(doc)).not.toHaveProperty('shown');
	const undo = undoManagerOf(doc, 'here');
	doc.transact(() => setShown(doc, 'Vin', { unit: 'mV', digits: 3 }), 'here');
	undo.stopCapturing();
	doc.transact(() => setShown(doc, 'Iin', { digits: 3 }), 'here');
	expect(Object.entries(toContent(doc).shown ?? {})).toEqual([
		['Iin', { digits: 3 }],
		['Vin', { unit: 'mV', digits: 3 }],
	]);
	undo.undo();
	expect(toContent(doc).shown).toEqual({ Vin: { unit: 'mV', digits: 3 } });
	const then = toContent(doc);
	setShown(doc, 'Vin', {});
	expect(toContent(doc)).not.toHaveProperty('shown');
	matchContent(doc, then);
	expect(toContent(doc)).toEqual(then);
});

test('nothing else is taken for it', () => {
	const found = (change: (doc: Y.Doc) => void) => {
		const doc = noteOf();
		let strange: string | undefined;
		doc.on('afterTransaction', (transaction) => (strange ??= strangenessOf(transaction)));
		doc.transact(() => change(doc));
		return strange;
	};
	expect(found((doc) => setShown(doc, 'Vin', { unit: 'mV' }))).toBeUndefined();
	const odd: [string, unknown][] = [
		['Vin', { unit: 5 }],
		['Vin', { digits: 13 }],
		['Vin', { digits: 2.5 }],
		['Vin', {}],
		['Vin', { unit: 'mV', colour: 'red' }],
		['Vin', 'mV'],
		['Vin', null],
		['constructor', { digits: 2 }],
		['two words', { digits: 2 }],
	];
	for (const [name, value] of odd) {
		const put = (doc: Y.Doc) => (shownOf(doc) as Y.Map<unknown>).set(name, value);
		expect(found(put), `${name} ${JSON.stringify(value)}`).toMatch(/readout/);
		const doc = noteOf();
		put(doc);
		expect(toContent(doc)).not.toHaveProperty('shown');
	}
	expect(found((doc) => shownOf(doc).set('Vin', new Y.Map() as never))).toMatch(/readout/);
	const doc = noteOf();
	setShown(doc, 'Vin', { digits: 2 });
	expect(countStrange(doc)).toBe(0);
});
