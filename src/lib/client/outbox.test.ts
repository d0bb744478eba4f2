import fc from 'fast-check';
import { expect, test } from 'vitest';
import * as Y from 'yjs';
import { Outbox } from './outbox';

/** Updates of a document, one per word. */
function updatesOf(words: readonly string[]): Uint8Array[] {
	const doc = new Y.Doc();
	const updates: Uint8Array[] = [];
	doc.on('update', (update: Uint8Array) => updates.push(update));
	for (const word of words) doc.getText('title').insert(doc.getText('title').length, word);
	return updates;
}

function textOf(updates: readonly Uint8Array[]): string {
	const doc = new Y.Doc();
	for (const update of updates) Y.applyUpdate(doc, update);
	return doc.getText('title').toJSON();
}

test('what was sent and not acknowledged is sent again, with the same id and bytes', () => {
	const outbox = new Outbox();
	const [first, second] = updatesOf(['one ', 'two ']) as [Uint8Array, Uint8Array];
	outbox.add(first);
	const sent = outbox.take();
	outbox.add(second);
	sent.push(...outbox.take());
	expect(outbox.take()).toEqual([]);
	outbox.settle([sent[0]!.id]);
	outbox.reset();
	expect(outbox.take()).toMatchObject([{ id: sent[1]!.id, update: second }]);
	expect(outbox.count).toBe(1);
});

test('edits made without a connection go together as one', () => {
	const outbox = new Outbox();
	const words = Array.from({ length: 500 }, (_, index) => `${index} `);
	for (const update of updatesOf(words)) outbox.add(update);
	expect(outbox.count).toBe(500);
	const sent = outbox.take();
	expect(sent).toHaveLength(1);
	expect(textOf(sent.map(({ update }) => update))).toBe(words.join(''));
});

test('no more than a window of edits is under way, and nothing is lost or counted as saved before its time', () => {
	const deed = fc.constantFrom('type', 'take', 'acknowledge', 'break');
	fc.assert(
		fc.property(fc.array(deed, { maxLength: 300 }), (deeds) => {
			const outbox = new Outbox();
			const updates = updatesOf(deeds.map((_, index) => `${index} `));
			const underWay = new Map<string, Uint8Array>();
			const stored = new Map<string, Uint8Array>();
			let typed = 0;
			for (const what of [...deeds, 'break', 'take'] as const) {
				if (what === 'type') outbox.add(updates[typed++]!);
				else if (what === 'break') outbox.reset();
				else if (what === 'take') {
					for (const { id, update } of outbox.take()) {
						if (underWay.has(id)) expect(underWay.get(id)).toBe(update);
						underWay.set(id, update);
					}
					expect(underWay.size).toBeLessThanOrEqual(64);
				} else {
					const [oldest] = underWay;
					if (!oldest) continue;
					stored.set(...oldest);
					underWay.delete(oldest[0]);
					outbox.settle([oldest[0]]);
				}
				const everything = textOf([...stored.values()]) === textOf(updates.slice(0, typed));
				if (outbox.count === 0) expect(everything).toBe(true);
			}
			while (outbox.count > 0) {
				for (const { id, update } of outbox.take()) underWay.set(id, update);
				for (const [id, update] of underWay) stored.set(id, update);
				outbox.settle([...underWay.keys()]);
				underWay.clear();
			}
			expect(textOf([...stored.values()])).toBe(textOf(updates.slice(0, typed)));
		}),
		{ numRuns: 50 },
	);
});
