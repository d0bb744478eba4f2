import * as decoding from 'lib0/decoding';
import fc from 'fast-check';
import { expect, test } from 'vitest';
import { closeCode, closeSentence } from './closing';
import { decodeEdit, decodeJson, encodeEdit, encodeJson, messageType } from './messages';

test('an edit comes back as it was written', () => {
	fc.assert(
		fc.property(fc.string(), fc.uint8Array(), (id, update) => {
			const decoder = decoding.createDecoder(encodeEdit(id, update));
			expect(decoding.readVarUint(decoder)).toBe(messageType.edit);
			expect(decodeEdit(decoder)).toEqual({ id, update });
			expect(decoding.hasContent(decoder)).toBe(false);
		}),
	);
});

test('an edit that is cut off anywhere is not read', () => {
	const message = encodeEdit('some-id', Uint8Array.of(1, 2, 3, 4));
	for (let end = 1; end < message.length; end += 1) {
		const decoder = decoding.createDecoder(message.slice(0, end));
		decoding.readVarUint(decoder);
		expect(() => decodeEdit(decoder)).toThrow();
	}
});

test('a message whose body is JSON comes back as it was written', () => {
	fc.assert(
		fc.property(fc.jsonValue(), (body) => {
			const decoder = decoding.createDecoder(encodeJson('results', body));
			expect(decoding.readVarUint(decoder)).toBe(messageType.results);
			expect(decodeJson(decoder)).toEqual(JSON.parse(JSON.stringify(body)));
		}),
	);
});

test('every close code has a sentence, short enough for a close frame', () => {
	for (const code of Object.values(closeCode)) {
		const sentence = closeSentence(code);
		expect(sentence).toMatch(/^[A-Z].*\.$/);
		expect(new TextEncoder().encode(sentence).length).toBeLessThanOrEqual(123);
	}
});
