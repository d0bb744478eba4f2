import * as fc from 'fast-check';
import { expect, test } from 'vitest';
import { applyChanges, changesBetween, type Changes } from './changes';

const item = fc.record({ cell: fc.constantFrom('a', 'b'), value: fc.nat(3) });
const results = fc.record(
	{
		engine: fc.constantFrom('1', '2'),
		lines: fc.array(item, { maxLength: 8 }),
		quantities: fc.dictionary(fc.constantFrom('R', 'V', 'constructor', '__proto__'), item),
		trials: fc.option(item),
		curves: fc.oneof(item, fc.array(item), fc.constant(undefined)),
	},
	{ requiredKeys: ['lines', 'quantities'] },
);
const asJson = <T>(value: T) => JSON.parse(JSON.stringify(value)) as T;
const changesOf = (before: object, now: object) => asJson(changesBetween(before, now));

test('changes make results of any earlier ones, as JSON has both', () => {
	fc.assert(
		fc.property(results, results, (before, now) => {
			expect(applyChanges(asJson(before), changesOf(before, now))).toEqual(asJson(now));
		}),
	);
});

test('what did not change is not told and stays the same object', () => {
	const line = (value: number) => ({ cell: 'a', value });
	const before = { lines: [line(1), line(2), line(3)], quantities: { V: line(1), R: line(2) } };
	const now = { lines: [line(1), line(9), line(3)], quantities: { V: line(1), R: line(9) } };
	const changes = changesOf(before, now);
	expect(changes).toEqual<Changes>({
		parts: { lines: { list: [[1, line(9)]] }, quantities: { set: { R: line(9) }, gone: [] } },
		gone: [],
	});
	const after = applyChanges(before, changes);
	expect(after.lines[0]).toBe(before.lines[0]);
	expect(after.quantities.V).toBe(before.quantities.V);
});

test('what is the same object is not looked into', () => {
	const toJSON = () => expect.fail('This was read.');
	const line = { toJSON };
	const before = { lines: [line, { value: 1 }], quantities: { V: line } };
	const now = { lines: [line, { value: 2 }], quantities: { V: line } };
	expect(changesBetween(before, now)).toEqual<Changes>({
		parts: { lines: { list: [[1, { value: 2 }]] } },
		gone: [],
	});
});

test('a line put between others is told alone', () => {
	expect(changesOf({ lines: [1, 2, 3, 4] }, { lines: [1, 2, 7, 3, 4] })).toEqual({
		parts: { lines: { from: 2, removed: 0, items: [7] } },
		gone: [],
	});
});
