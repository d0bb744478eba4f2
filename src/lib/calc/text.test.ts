import { describe, expect, it } from 'vitest';
import { compute, onlyFault, requirement, shown, text } from '../../../tests/support/notes';

describe('Text in quotes', () => {
	it('is a value of its own, shown as it is', () => {
		expect(shown('"4k7"')).toBe('4k7');
		expect(shown('mark = "yellow violet red" # bands')).toBe('yellow violet red');
		expect(shown('a = "x"\nb = a')).toBe('x');
		expect(shown('f(x) = x\nf("50 %")')).toBe('50 %');
	});

	it('may stand between the curled quotes that some keyboards put', () => {
		expect(shown('\u201c4k7\u201d')).toBe('4k7');
	});

	it('has neither number nor unit in the results, and can be quoted', () => {
		const { quantities, figures, errors } = compute('mark = "4k7"', text('{{mark}}'));
		expect(errors).toEqual([]);
		expect(quantities.mark).toMatchObject({ value: null, unit: '1', text: '4k7' });
		expect(figures[0]?.readout?.text).toBe('4k7');
	});

	it.each([
		'"a" + "b"',
		'1 V + "1"',
		'"a" * 2',
		'"a" / "b"',
		'"a" ^ 2',
		'-"a"',
		'not "a"',
		'"a" and true',
		'"a" == "a"',
		'1 < "2"',
		'true ? "a" : "b"',
		'"a" ? 1 : 2',
		'["a", "b"]',
		'"a":"b"',
		'"abc"[1]',
		'[1, 2]["1"]',
		'"5" to V',
		'("5") V',
		'"a" mod 2',
		'sin("a")',
		'abs("a")',
		'sqrt("a")',
		'sum("a", "b")',
		'min("a", 1)',
		'count("a")',
		'parallel("a")',
		'round("a")',
		'round(1 V, 1, "V")',
		'number(1 V, "V")',
		'preferred(5 kohm, "E24")',
		'divider("a", 1 ohm, 1 ohm)',
		'lsb(3 V, "12")',
		'f(x) = x + 1\nf("a")',
	])('is refused by %s', (source) => {
		const { errors, lines } = compute(source);
		expect(errors).toHaveLength(1);
		expect(errors[0]?.code).toMatch(/^(dimension|value|syntax)$/);
		expect(errors[0]?.message).toMatch(/text in quotes|unit/);
		expect(lines.at(-1)?.readout).toBeUndefined();
	});

	it('is no side of a requirement', () => {
		expect(onlyFault('a = "x"', requirement('a <= "y"')).code).toMatch(/dimension|notComparable/);
	});

	it.each([
		['x = "4k7', 'notAllowed', 4, 5, 'This text in quotes has no end.'],
		['x = "4k7 # no', 'notAllowed', 4, 5, 'This text in quotes has no end.'],
		["x = '4k7'", 'notAllowed', 4, 5, 'This quotation mark has no meaning in a formula.'],
		['"a\\nb"', 'notAllowed', 0, 1, 'Text in quotes holds plain characters only, no `\\`.'],
		['"a\u202eb"', 'notAllowed', 0, 1, 'Text in quotes holds plain characters only, no `\\`.'],
		[`"${'x'.repeat(41)}"`, 'tooLarge', 0, 43, 'A text in quotes has at most 40 characters.'],
		['2 "a"', 'syntax', 2, 5, '`"a"` stands where a value is expected.'],
	])('%s is a fault at its place', (source, code, from, to, message) => {
		expect(onlyFault(source)).toMatchObject({ code, from, to, message });
	});
});
