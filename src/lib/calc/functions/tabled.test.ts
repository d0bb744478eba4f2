import { describe, expect, it } from 'vitest';
import { compute, onlyFault, shown, spaced } from '../../../../tests/support/notes';

describe('A function that a table answers', () => {
	it.each([
		['dB([1, 10, 100])', '[0, 20, 40]'],
		['pt([0, 60] degC, 1 kohm)', '[1, 1.232 42] kΩ'],
		['thermocouple("K", [0, 100] degC)', '[0, 4.096 23] mV'],
		['polynomial([0, 1, 2], 1, 1, 1)', '[1, 3, 7]'],
		['interpolate([0.5, 1.5] V, [0, 1, 2] V, [0, 10, 40] mA)', '[5, 25] mA'],
	])('%s takes a list for its first number: %s', (source, text) => {
		expect(shown(source)).toBe(text);
	});

	it.each([
		['pt(20 degC, 100 ohm)', 'pt(293.15 K, 100 ohm)'],
		['pt(20 degC, 100 ohm)', 'pt(68 degF, 100 ohm)'],
		['thermocouple("J", 20 degC)', 'thermocouple("J", 293.15 K)'],
		['johnson(1 kohm, 20 degC, 1 Hz)', 'johnson(1 kohm, 293.15 K, 1 / s)'],
		['ntcBeta(0 degC, 1 kohm, 25 degC, 3 * 1000 K)', 'ntcBeta(273.15 K, 1 kohm, 298.15 K, 3000 K)'],
	])('%s takes a temperature as %s does', (a, b) => {
		const { quantities, errors } = compute(`a = ${a}\nb = ${b}`);
		expect(errors).toEqual([]);
		expect(quantities.a?.value).toBeCloseTo(quantities.b?.value ?? NaN, 12);
	});

	it.each([
		['pt(-200 degC, 100 ohm)', '18.5201 Ω'],
		['pt(850 degC, 100 ohm)', '390.481 Ω'],
		['thermocouple("K", 1372 degC)', '54.8864 mV'],
		['thermocouple("K", -270 degC)', '−6.457 74 mV'],
	])('%s reaches the end of its table: %s', (source, text) => {
		// IEC 60751 prints 18.52 Ω and 390.48 Ω, NIST SRD 60 prints 54.886 mV and −6.458 mV.
		expect(shown(source)).toBe(text);
	});

	it.each([
		['pt(900 degC, 100 ohm)', '`T` is outside −200 to 850 °C.'],
		['pt(20 degC, 0 ohm)', '`R0` must be above zero.'],
		['ptTemperature(1 ohm, 100 ohm)', '`R` is outside 18.5151 to 390.486 Ω.'],
		['settling(0 ohm, 1 nF, 12)', '`Rs` must be above zero.'],
		[
			'settling(1 ohm, 1 nF, 12, 5000)',
			'The error allowed is the whole range, so nothing has to settle.',
		],
		['settling(1 ohm, 1 nF, 12.5)', 'The number of bits is a whole number from 1 to 32.'],
		['dB(0)', '`ratio` must be above zero.'],
		['dB(2, "voltage")', 'A level is one of amplitudes or of powers.'],
		['dBV(-1 V)', '`V` must be above zero.'],
		['dBm(0 W)', '`P` must be above zero.'],
		['fromdB(1e6)', 'The ratio at this level is beyond what a number holds.'],
		['johnson(1 ohm, -300 degC, 1 Hz)', '`T` must be above zero.'],
		['thermocouple("Z", 1 K)', 'There is no table for thermocouples of type Z.'],
		[
			'thermocouple("constructor", 1 K)',
			'There is no table for thermocouples of type constructor.',
		],
		['thermocouple("K", 1400 degC)', '`T` is outside −270 to 1372 °C.'],
		['thermocouple("K", 20 degC, 1400 degC)', '`Tref` is outside −270 to 1372 °C.'],
		['thermocoupleTemperature("K", 1 V)', 'A thermocouple of type K gives −6.458 to 54.886 mV.'],
		['thermocoupleTemperature("K", 1 mV, -1 K)', '`Tref` is outside −270 to 1372 °C.'],
		['ntcBeta(1 K, 1 kohm, 298 K, 1e6 K)', 'The resistance is too large for a number.'],
		[
			'ntcBetaTemperature(1e-9 ohm, 1 kohm, 298 K, 100 K)',
			'No temperature gives so low a resistance.',
		],
		['steinhart(1 kohm, 0, 0, 0)', 'These coefficients give no temperature at this resistance.'],
		[
			'steinhartResistance(1000 K, 1, 1e-9, 0)',
			'These coefficients give no resistance at this temperature.',
		],
		[
			'steinhartResistance(1 K, 1, 0, 0)',
			'`b` must be above zero: resistance falls with temperature.',
		],
		['interpolate(3, [1, 2], [1, 2])', 'The table runs from 1 to 2.'],
		['interpolate(1, [1, 2], [1, 2, 3])', 'xs has 2 members and ys has 3.'],
		['interpolate(1, [1, 1], [1, 2])', 'The members of `xs` must rise, or fall, all the way.'],
		['interpolate(1, 1, 2)', 'The second and the third value are lists.'],
		[
			'interpolate(1, [1, 2], [1, 2], "spline")',
			'Points are joined by straight lines or by cubics.',
		],
		['pt(20 degC, [1, 2] ohm)', '`R0` is one value, not a list.'],
		['dB(1, "power", 2)', '`dB` takes 1 to 2 values, not 3.'],
		['rkm("4.7k")', '"4.7k" is no value code.'],
		['rkm("4m7")', 'm may mean milliohms or millifarads here.'],
		['rkm(rkmText(4.7 kohm))', 'A value code is read where it is typed in quotes.'],
		['rkmText(123456 ohm)', 'A value code holds 5 digits at most.'],
		['rkmTextC(-1 nF)', '`C` must be above zero.'],
		['bands(1234 ohm, 1 %)', 'Bands hold three digits.'],
		['bands(0 ohm)', '`R` must be above zero.'],
		['bandsValue("red mauve red")', '"mauve" is no colour of a band.'],
		['findDivider(1 V, 2 V, E24)', 'A divider gives less than its input.'],
		['findDivider(3 V, 1 V, E24, 1 ohm)', 'No pair within 5 % meets every wish'],
		['findPart(1 kohm, E24, 2 kohm, 1 kohm)', 'No part of this series lies within these bounds.'],
	])('%s is refused: %s', (source, message) => {
		const fault = onlyFault(source);
		expect(fault.code).toMatch(/^(value|syntax)$/);
		expect(fault.message).toContain(message);
	});

	it.each([
		['pt(20, 100 ohm)', 'The temperature is in K, not a pure number.'],
		['pt(20 degC, 100)', 'The resistance at 0 °C is in Ω, not a pure number.'],
		['settling(1 V, 1 nF, 12)', 'The source resistance is in Ω, not V.'],
		['settling(1 ohm, 1 nF, 12, 1 V)', 'The error in steps is a pure number, not V.'],
		['dB(1 V)', 'The ratio is a pure number, not V.'],
		['dBV(2)', 'The voltage is in V, not a pure number.'],
		['dBm(2 V)', 'The power is in W, not V.'],
		['thermocouple(1, 2 K)', 'The type of a thermocouple is text in quotes, not a pure number.'],
		['thermocoupleTemperature("K", 2 K)', 'The voltage is in V, not K.'],
		[
			'ntcBeta(1 K, 1 ohm, 1 K, 25 degC)',
			'Computes with a temperature in °C, which has a zero of its own.',
		],
		['steinhart(1 ohm, 1 V, 1, 1)', 'A coefficient is a plain number or in 1/K, not in V.'],
		['polynomial(1 V, 1 A, 2 A)', 'The coefficient of x is in S here, not A.'],
		['polynomial(1 V, 1, 2 / V, 3)', 'The coefficient of x^2 is in V⁻² here, not a pure number.'],
		['polynomial(20 degC, 1, 2)', 'Raises a temperature in °C, which has a zero of its own.'],
		['interpolate(1 V, [1, 2] A, [1, 2])', 'Looks up V in a table over A.'],
		['rkm(4)', 'A value code is text in quotes, not a pure number.'],
		['rkmText(1 nF)', 'The resistance is in Ω, not F.'],
		['bands(1 kohm, 1 %, 50 ppm)', 'The temperature coefficient is in 1/K, not a pure number.'],
		['findDivider(15 V, 3 V, E24, 1 V)', 'The source resistance is in Ω, not V.'],
		['findPart(1 kohm, E24, 2 V)', 'Compares Ω and V together.'],
	])('%s is a fault of units: %s', (source, message) => {
		expect(onlyFault(source)).toMatchObject({ code: 'dimension', message });
	});

	it('tells the kind of a code before anything is computed', () => {
		expect(shown('f(c) = rkm(c)\nf("4k7") + 1 kohm')).toBe('5.7 kΩ');
		expect(shown('f(c) = rkm(c)\nf("4k7")\nf("4p7")')).toBe('4.7 pF');
		expect(shown('mark = "2R2"\nrkm(mark) * 1 A')).toBe('2.2 V');
		expect(onlyFault('rkm("4k7") + rkm("4p7")').code).toBe('dimension');
	});

	it('reads back what it marks', () => {
		for (const value of ['4.7 kohm', '470 mohm', '38.3 kohm', '1 Mohm']) {
			const { quantities } = compute(`r = ${value}\nmark = rkmText(r)\ncolours = bands(r, 1 %)`);
			const code = spaced(quantities.mark?.text ?? '');
			expect(compute(`x = rkm("${code}")`).quantities.x?.value).toBe(quantities.r?.value);
			const read = compute(`x = bandsValue("${quantities.colours?.text ?? ''}")`);
			expect(read.quantities.x?.value).toBe(quantities.r?.value);
		}
	});

	it('takes ten thousand readings at once', () => {
		expect(shown('max(thermocoupleTemperature("K", (1:10000) * 5 uV))')).toBe(
			shown('thermocoupleTemperature("K", 50 mV)'),
		);
		expect(shown('count(pt((1:10000) * 0.01 K + 200 K, 100 ohm))')).toBe('10 000');
	});

	it('counts what a search costs', () => {
		const { errors } = compute(
			'f(n) = n < 1 ? 0 ohm : findDivider(15 V, 3 V, E192)[1] + f(n - 1)\nf(80)',
		);
		expect(errors.map(({ code }) => code)).toEqual(['tooLong']);
	});
});
