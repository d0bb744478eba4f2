import { describe, expect, it } from 'vitest';
import { defaultOptions, evaluate } from '../evaluate';
import { functions } from './registry';

describe('The functions of the language', () => {
	const examples = [...functions.values()].flatMap((fn) =>
		fn.examples.map((example) => ({ name: fn.name, ...example })),
	);

	it.each(examples)('$source gives $result', ({ source, result }) => {
		const cells = [{ id: 'c', kind: 'calculation' as const, source }];
		const { lines, errors } = evaluate(cells, defaultOptions);
		expect(errors).toEqual([]);
		expect(lines.at(-1)?.readout?.text.replace(/[\u00a0\u202f]/g, ' ')).toBe(result);
	});

	it('each have help, a signature that begins with the name, and an example', () => {
		for (const fn of functions.values()) {
			expect(fn.signature.startsWith(`${fn.name}(`)).toBe(true);
			expect(fn.help.length).toBeGreaterThan(5);
			expect(fn.examples.length).toBeGreaterThan(0);
		}
	});
});
