import { describe, expect, it } from 'vitest';
import {
	calculation,
	compute,
	onlyFault,
	requirement,
	shown,
	spaced,
	text,
} from '../../../tests/support/notes';

const channel = `Vmax = 32 V # top of range
Vref = 2.5 V
R1 = 470 kohm
R2 = 38.3 kohm
Vadc = Vmax * R2 / (R1 + R2)`;

describe('A note', () => {
	it('computes its quantities with units, unrounded and as they are shown', () => {
		const { quantities, errors } = compute(channel);
		expect(errors).toEqual([]);
		expect(quantities.Vadc).toMatchObject({
			cell: 'c0',
			line: 5,
			unit: 'V',
			dependsOn: ['Vmax', 'R2', 'R1'],
			readout: { unit: 'V' },
		});
		expect(quantities.Vadc?.value).toBeCloseTo((32 * 38300) / 508300, 14);
		expect(spaced(quantities.Vadc?.text ?? '')).toBe('2.411 17 V');
		expect(quantities.Vmax?.description).toBe('top of range');
		expect(quantities.R1).toMatchObject({ unit: 'ohm', value: 470_000 });
		expect(spaced(quantities.R1?.text ?? '')).toBe('470 kΩ');
	});

	it('does not mind the order of its lines and cells', () => {
		const { quantities } = compute('b = a + c', 'c = 2 V', 'a = 1 V');
		expect(spaced(quantities.b?.text ?? '')).toBe('3 V');
	});

	it('names the circle on each of its lines, and only there', () => {
		const { errors } = compute('a = b\nb = c\nc = a\nd = 1');
		expect(errors.map(({ line, code }) => [line, code])).toEqual([
			[1, 'circle'],
			[2, 'circle'],
			[3, 'circle'],
		]);
		expect(errors[0]?.message).toContain('a → b → c → a');
		expect(errors[1]?.message).toContain('b → c → a → b');
	});

	it('tells each later definition of a name where the first one stands', () => {
		const fault = onlyFault('x = 1', 'y = 2\nx = 3');
		expect(fault).toMatchObject({ cell: 'c1', line: 2, from: 0, to: 1, code: 'duplicate' });
		expect(fault.message).toContain('cell 1, line 1');
	});

	it('takes a Greek letter and its name for one name', () => {
		expect(shown('delta_gain = 2\nδ_gain * 3')).toBe('6');
		expect(onlyFault('alpha = 1\nα = 2').code).toBe('duplicate');
	});

	it('suggests the nearest name for an unknown one', () => {
		const fault = onlyFault(`${channel}\nx = Vmx * 2`);
		expect(fault).toMatchObject({
			line: 6,
			from: 4,
			to: 7,
			code: 'unknownName',
			replacement: 'Vmax',
		});
	});

	it('keeps the symbols of units from being names', () => {
		const fault = onlyFault('V = 3');
		expect(fault).toMatchObject({ from: 0, to: 1, code: 'reserved', replacement: 'Vin' });
		expect(`${fault.message} ${fault.mend}`).toBe(
			'`V` is the unit volt. Call the quantity `Vin`, say.',
		);
		for (const name of [
			'pi',
			'sqrt',
			'preferred',
			'E24',
			'kΩ',
			'mA',
			'to',
			'__proto__',
			'toString',
		])
			expect(onlyFault(`${name} = 3`).code).toBe('reserved');
	});

	it('leaves names free that only an uncommon prefix would make a unit', () => {
		expect(compute('Rs = 1 kohm\nTs = 1 ms\nfs = 1 kHz\ntau = 2 s\ni = 3 A').errors).toEqual([]);
	});

	it('reports what can be read two ways with both readings', () => {
		const { errors, lines } = compute('C = 10 nF\nQ = 5 C');
		expect(errors.map(({ line, code }) => [line, code])).toEqual([
			[1, 'reserved'],
			[2, 'ambiguous'],
		]);
		expect(errors[1]?.message).toContain('5 coulomb');
		expect(errors[1]?.message).toContain('5 times the quantity `C`');
		expect(spaced(lines[1]?.readout?.text ?? '')).toBe('5 C');
	});

	it('does not take a lone unit symbol for a quantity', () => {
		const fault = onlyFault('R = 1 kohm\nx = R * C');
		expect(fault).toMatchObject({
			line: 2,
			from: 8,
			to: 9,
			code: 'ambiguous',
			replacement: '(1 C)',
		});
	});

	it('lets a line wait for the one with the error, and says which', () => {
		const { errors } = compute('a = 1 V + 1 A\nb = a * 2\nc = b * 2\nd = 4');
		expect(errors.map(({ line, code }) => [line, code])).toEqual([
			[1, 'dimension'],
			[2, 'waits'],
			[3, 'waits'],
		]);
		expect(errors[1]?.message).toBe('Waits for `a` (cell 1, line 1), which has an error.');
		expect(errors[2]?.message).toBe(
			'Waits, through `b`, for `a` (cell 1, line 1), which has an error.',
		);
	});

	it('knows the name of a line that cannot be read', () => {
		const { errors } = compute('a = (3\nb = a');
		expect(errors.map(({ code }) => code)).toEqual(['syntax', 'waits']);
	});

	it('gives the lines of the sheet in order, with their kinds', () => {
		const { lines } = compute('# head\n\nx = 2\nf(x) = x^2\nf(x)');
		expect(lines.map(({ kind, name }) => [kind, name])).toEqual([
			['comment', undefined],
			['blank', undefined],
			['definition', 'x'],
			['function', 'f'],
			['expression', undefined],
		]);
		expect(lines[4]?.readout?.text).toBe('4');
	});
});

describe('Units', () => {
	it.each([
		['3 V + 2 A', 'Adds V to A.'],
		['3 V - 2 A', 'Subtracts A from V.'],
		['3 V > 2 A', 'Compares V with A.'],
		['3 V to A', 'Converts V to A.'],
		['min(1 V, 2 A)', 'Compares V and A together.'],
		['sin(3 V)', 'The value of `sin` is a pure number, not V.'],
		['2 ^ (3 V)', 'The exponent is a pure number, not V.'],
		['[1 V, 2 A]', 'A list has one unit, not V and A.'],
	])('that do not fit in %s are named on both sides', (source, message) => {
		expect(onlyFault(source)).toMatchObject({ code: 'dimension', message });
	});

	it('are checked before there are numbers', () => {
		expect(onlyFault('f(x) = x + 2 V + 3 A')).toMatchObject({ from: 7, code: 'dimension' });
		expect(onlyFault('x = 1 > 0 ? 1 V : 1 A').code).toBe('dimension');
		const { errors } = compute('a = 1 / 0\nb = a + 2 V + 1 A');
		expect(errors.map(({ code }) => code)).toEqual(['overflow', 'dimension']);
	});

	it('of a function follow from the values it is called with', () => {
		expect(shown('sq(x) = x^2\nsq(3 V)')).toBe('9 V²');
		expect(shown('p(x, n) = x^n\np(2 V, 3)')).toBe('8 V³');
		expect(shown('p(x, n) = x^n\np(2 V, 3)\np(2 V, 2)')).toBe('4 V²');
		expect(shown('f(n) = n < 1 ? 1 V : q(n)\nq(n) = f(n - 1)\nq(3)')).toBe('1 V');
		expect(shown('x = 2 A\nq(y) = x * y\nf(x) = q(1) + x\nf(1 A)')).toBe('3 A');
		const fault = onlyFault('f(x) = x + 1 V\nf(2 A)');
		expect(fault).toMatchObject({ line: 2, from: 0, to: 6, code: 'dimension' });
	});

	it.each([
		['470 kΩ', '470 kΩ'],
		['470 k\u2126', '470 kΩ'],
		['470 kohm', '470 kΩ'],
		['2.2 Mohm', '2.2 MΩ'],
		['3 \u00b5A', '3 µA'],
		['3 \u03bcA', '3 µA'],
		['3 uA', '3 µA'],
		['25 °C', '25 °C'],
		['5 V * 2 A', '10 W'],
		['5 V / 2 A', '2.5 Ω'],
		['1 / (2 ohm)', '500 mS'],
		['2.5 V / 10 K', '250 mV/K'],
		['10 uF * 10 kohm', '100 ms'],
		['1 / (4 ms)', '250 s⁻¹'],
		['1 / (4 ms) to Hz', '250 Hz'],
		['2 * 5 kHz', '10 kHz'],
		['3 h', '3 h'],
		['2 * 3 h', '6 h'],
		['5 nV/sqrt(Hz) * sqrt(10 kHz)', '500 nV'],
		['6.5 Ah to C', '23 400 C'],
		['0.1 %', '0.1 %'],
		['0.5 % + 0.1 %', '0.6 %'],
		['2.5 V * 0.1 %', '2.5 mV'],
		['0.0015 to %', '0.15 %'],
		['50 ppm', '50 ppm'],
		['1 / 3', '0.333 333'],
		['0.07535', '0.075 35'],
		['0.1 + 0.2', '0.3'],
		['2^24', '16 777 216'],
		['1e-9', '1 × 10⁻⁹'],
		['999999.6 V', '1 MV'],
		['-0.5 mV', '−500 µV'],
		['0 V', '0 V'],
		['5 m * 3 N', '15 J'],
		['90 deg', '90 °'],
		['[1, 2, 3] mV', '[1, 2, 3] mV'],
		['2 V < 3 V', 'true'],
	])('of %s are shown as %s', (source, result) => {
		expect(shown(source)).toBe(result);
	});

	it('that were chosen stay, and the value counts in them', () => {
		const { quantities } = compute('x = 2.5 V to mV\nt = 90 min');
		expect(quantities.x).toMatchObject({ unit: 'mV', value: 2500 });
		expect(quantities.t).toMatchObject({ unit: 'min', value: 90 });
	});

	it('of temperature tell a temperature from a difference', () => {
		expect(shown('25 degC - 20 degC')).toBe('5 K');
		expect(shown('25 degC + 5 K')).toBe('30 °C');
		expect(shown('25 degC to degF')).toBe('77 °F');
		expect(shown('25 degC to K')).toBe('298.15 K');
		expect(shown('Tj = 85 degC\n10 mV/degC * (Tj - 25 degC)')).toBe('600 mV');
		expect(onlyFault('25 degC + 5 degC').message).toBe('Adds two temperatures in °C.');
		expect(onlyFault('2 * 25 degC').mend).toContain('(T to K)');
	});

	it('read `%` as percent and never as a remainder', () => {
		expect(onlyFault('5 % 3').mend).toBe('Write `mod(a, b)` for a remainder.');
		expect(onlyFault('5%3').code).toBe('syntax');
	});
});

describe('A fault', () => {
	it.each([
		['3 +', 2, 3, 'syntax'],
		['3 + * 4', 4, 5, 'syntax'],
		['(3', 0, 1, 'syntax'],
		['3)', 1, 2, 'syntax'],
		['2,5 V', 1, 2, 'syntax'],
		['1 000', 2, 5, 'syntax'],
		['470 kohm 0.1 %', 0, 12, 'syntax'],
		['x = 1 / 0', 4, 9, 'overflow'],
		['1 + 1e400', 4, 9, 'overflow'],
		['1 + sqrt(-1)', 4, 12, 'value'],
		['1 + (2 V)', 0, 9, 'dimension'],
		['max(1 V, (2 A))', 9, 14, 'dimension'],
		['10 k', 3, 4, 'unknownName'],
		['  foo(1, 2)', 2, 5, 'unknownName'],
		['1:1e9', 0, 5, 'tooLarge'],
		['divider(1 V, 2 ohm)', 0, 19, 'syntax'],
	])('in %s stands at columns %i to %i with the code %s', (source, from, to, code) => {
		expect(onlyFault(source)).toMatchObject({ from, to, code, line: 1 });
	});

	it('in one line leaves the others alone', () => {
		const { quantities, errors } = compute('a = 1 V\nb = )\nc = 1 / 0\nd = a * 2');
		expect(errors).toHaveLength(2);
		expect(Object.keys(quantities)).toEqual(['a', 'd']);
	});
});

describe('A requirement', () => {
	const judged = (source: string, values = channel) =>
		compute(values, requirement(source)).requirements[0];

	it('that is met says what there is to spare', () => {
		const found = judged('Vadc <= 0.98 * Vref # head-room');
		expect(found).toMatchObject({ cell: 'req', line: 1, verdict: 'met', unit: 'V', lower: null });
		expect(spaced(found?.text ?? '')).toBe('Met, 1.6 % to spare');
		expect(found?.margin).toBeCloseTo(2.45 - (32 * 38300) / 508300, 12);
		expect(found?.upper).toBeCloseTo(2.45, 12);
	});

	it('that is not met says how far it is beyond the limit', () => {
		const found = judged('Vadc < 2.4 V');
		expect(found?.verdict).toBe('not met');
		expect(spaced(found?.text ?? '')).toBe('Not met, 11.2 mV beyond the limit');
	});

	it('with two limits counts the nearer one', () => {
		const found = judged('2 V < Vadc <= 2.45 V');
		expect(found).toMatchObject({ verdict: 'met', lower: 2 });
		expect(found?.margin).toBeCloseTo(0.03883, 5);
	});

	it('may name the limit first', () => {
		expect(judged('2 V < Vadc')).toMatchObject({ lower: 2, upper: null, verdict: 'met' });
	});

	it('is met at the limit unless it must stay below, whatever rounding does', () => {
		expect(judged('x <= 0.3', 'x = 0.1 + 0.2')).toMatchObject({ verdict: 'met', margin: 0 });
		expect(judged('x < 0.3', 'x = 0.1 + 0.2')).toMatchObject({
			verdict: 'not met',
			text: 'Not met, exactly at the limit',
		});
	});

	it('of temperatures gives its margin as a difference', () => {
		expect(spaced(judged('T1 <= 85 degC', 'T1 = 82 degC')?.text ?? '')).toBe('Met, 3 K to spare');
	});

	it.each([
		['Vadc <= 3 A', 'dimension'],
		['Vadc', 'notComparable'],
		['Vadc != 2 V', 'notComparable'],
		['1 V < Vadc > 0 V', 'notComparable'],
		['Vadc = 3 V', 'notComparable'],
		['Vfoo < 3 V', 'unknownName'],
	])('such as %s is a fault: %s', (source, code) => {
		const { requirements, errors } = compute(channel, requirement(source));
		expect(requirements).toEqual([]);
		expect(errors).toMatchObject([{ cell: 'req', code }]);
	});

	it('waits for a quantity with an error', () => {
		const { errors } = compute('x = 1 / 0', requirement('x < 3'));
		expect(errors.map(({ code }) => code)).toEqual(['overflow', 'waits']);
	});
});

describe('A text', () => {
	it('quotes quantities, also in another unit, at their places', () => {
		const source = 'Sees {{Vadc}} or\n{{ Vadc : mV }}.';
		const { figures, errors } = compute(channel, text(source));
		expect(errors).toEqual([]);
		expect(figures.map(({ from, to }) => source.slice(from, to))).toEqual([
			'{{Vadc}}',
			'{{ Vadc : mV }}',
		]);
		expect(figures.map(({ readout }) => spaced(readout?.text ?? ''))).toEqual([
			'2.411 17 V',
			'2411.17 mV',
		]);
	});

	it.each([
		['{{Vad}}', 'unknownName', 2, 5],
		['{{Vadc: A}}', 'dimension', 7, 9],
		['{{Vadc: foo}}', 'unknownName', 8, 11],
		['{{}}', 'syntax', 2, 3],
	])('with %s carries a fault: %s', (quote, code, from, to) => {
		const { figures, errors } = compute(channel, text(`First\n${quote}`));
		expect(figures).toHaveLength(1);
		expect(figures[0]?.readout).toBeUndefined();
		expect(errors).toMatchObject([{ cell: 'text', line: 2, from, to, code }]);
	});

	it('says where the error is that a quoted quantity has', () => {
		const { errors } = compute(text('{{x}}'), calculation('x = 1 / 0'));
		expect(errors[0]).toMatchObject({ code: 'waits' });
		expect(errors[0]?.message).toContain('cell 2, line 1');
	});
});
