import * as decoding from 'lib0/decoding';
import { expect, test } from 'vitest';
import { messageType } from './messages';
import { countParts, decodePart, encodePart, maxPartBytes, PartsInbox } from './parts';

const answer = Uint8Array.from({ length: 2 * maxPartBytes + 7 }, (_, index) => index % 251);

function read(message: Uint8Array) {
	const decoder = decoding.createDecoder(message);
	expect(decoding.readVarUint(decoder)).toBe(messageType.part);
	return decodePart(decoder);
}

const partsOf = (id: number) =>
	Array.from({ length: countParts(answer) }, (_, index) => read(encodePart(id, answer, index)));

test('an answer comes back whole with its last part, and none of them is longer than it may be', () => {
	const inbox = new PartsInbox();
	const parts = partsOf(1);
	expect(parts.map(({ bytes }) => bytes.length)).toEqual([maxPartBytes, maxPartBytes, 7]);
	expect(parts.slice(0, -1).map((part) => inbox.take(part))).toEqual([undefined, undefined]);
	expect(inbox.take(parts.at(-1)!)).toEqual(answer);
});

test('parts of an answer that was broken off do not get into the next one', () => {
	const inbox = new PartsInbox();
	const [first, second] = partsOf(1);
	inbox.take(first!);
	expect(inbox.take(partsOf(2)[1]!)).toBeUndefined();
	expect(inbox.take(second!)).toBeUndefined();
	const whole = partsOf(3).map((part) => inbox.take(part));
	expect(whole.at(-1)).toEqual(answer);
});
