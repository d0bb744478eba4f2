import { expect, test } from 'vitest';
import * as Y from 'yjs';
import { outOfOrder } from '../../../tests/support/out-of-order';
import { takeUpdates } from './take-updates';

const before = new Y.Doc();
before.getText('title').insert(0, 'base');
const base = Y.encodeStateAsUpdate(before);
const { updates, whole } = outOfOrder(base, 'title');

const titleOf = (doc: Y.Doc) => doc.getText('title').toString();

test('edits that came out of their order do not wait for each other', () => {
	// What Yjs makes of them itself: should it ever give the whole title, the second offer can go.
	const plain = new Y.Doc();
	for (const update of [base, ...updates]) Y.applyUpdate(plain, update);
	expect(titleOf(plain)).not.toBe(whole('base'));

	const doc = new Y.Doc();
	for (const update of [base, ...updates]) takeUpdates(doc, [update], 'page');
	expect(titleOf(doc)).toBe(whole('base'));
	expect(doc.store.pendingStructs).toBeNull();
});

test('what waits for an edit that is not there goes on waiting, once', () => {
	const [needing, , , , needed] = updates;
	const doc = new Y.Doc();
	takeUpdates(doc, [base, needing!], 'page');
	const size = doc.store.pendingStructs?.update.length;
	takeUpdates(doc, [needing!], 'page');
	expect(size).toBeGreaterThan(0);
	expect(doc.store.pendingStructs?.update.length).toBe(size);
	expect(titleOf(doc)).toBe('base');
	takeUpdates(doc, [needed!], 'page');
	expect(titleOf(doc)).toBe('baseabcd');
});

test('all updates of one call make one event', () => {
	const doc = new Y.Doc();
	const origins: unknown[] = [];
	doc.on('update', (_, origin) => origins.push(origin));
	takeUpdates(doc, [base, ...updates], 'database');
	expect(titleOf(doc)).toBe(whole('base'));
	expect(origins).toEqual(['database']);
});
