import * as fc from 'fast-check';
import { expect, test } from 'vitest';
import { applyChanges, type Changes } from '$lib/protocol/changes';
import { ResultsText } from './results-text';

const item = fc.record({ cell: fc.constantFrom('a', 'b'), value: fc.nat(3) });
const results = fc.record(
	{
		engine: fc.constantFrom('1', '2'),
		lines: fc.array(item, { maxLength: 8 }),
		quantities: fc.dictionary(fc.constantFrom('R', 'V', 'constructor'), item),
		trials: fc.option(item),
	},
	{ requiredKeys: ['lines', 'quantities'] },
);
const changesOf = (before: object, now: object) =>
	JSON.parse(new ResultsText(now).since(new ResultsText(before))) as Changes;

test('whole results are their JSON, and changes make them of any earlier ones', () => {
	fc.assert(
		fc.property(results, results, (before, now) => {
			expect(JSON.parse(new ResultsText(now).whole())).toEqual(now);
			expect(applyChanges(before, changesOf(before, now))).toEqual(now);
		}),
	);
});

test('what did not change is not sent and stays the same object', () => {
	const line = (value: number) => ({ cell: 'a', value });
	const before = { lines: [line(1), line(2), line(3)], quantities: { V: line(1), R: line(2) } };
	const now = { lines: [line(1), line(9), line(3)], quantities: { V: line(1), R: line(9) } };
	const changes = changesOf(before, now);
	expect(changes).toEqual({
		parts: { lines: { list: [[1, line(9)]] }, quantities: { set: { R: line(9) }, gone: [] } },
		gone: [],
	});
	const after = applyChanges(before, changes);
	expect(after.lines[0]).toBe(before.lines[0]);
	expect(after.quantities.V).toBe(before.quantities.V);
});

test('a line put between others is sent alone', () => {
	const before = { lines: [1, 2, 3, 4] };
	expect(changesOf(before, { lines: [1, 2, 7, 3, 4] })).toEqual({
		parts: { lines: { from: 2, removed: 0, items: [7] } },
		gone: [],
	});
});
