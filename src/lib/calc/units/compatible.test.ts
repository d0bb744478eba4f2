import { expect, test } from 'vitest';
import { compatibleUnits, fittingUnit } from './compatible';

const texts = (unit: string) => compatibleUnits(unit).map(({ text }) => text);

test('a readout may stand in the prefixes of its unit and in the other units of its dimension', () => {
	expect(texts('V')).toEqual(['pV', 'nV', 'uV', 'mV', 'V', 'kV', 'MV']);
	expect(texts('mV/K')).toEqual(['pV/K', 'nV/K', 'uV/K', 'mV/K', 'V/K', 'kV/K', 'MV/K']);
	expect(texts('degC')).toEqual(expect.arrayContaining(['degC', 'degF', 'K', 'mK']));
	// A difference of temperatures has no place on a scale with a zero of its own.
	expect(texts('K')).not.toContain('degC');
	expect(texts('s')).toEqual(expect.arrayContaining(['us', 'ms', 's', 'min', 'h', 'day']));
	expect(texts('1')).toEqual(['ppb', 'ppm', '%']);
	expect(texts('V^2')).toEqual(['V^2']);
	expect(compatibleUnits('uohm')).toContainEqual({ text: 'kohm', label: 'kΩ' });
});

test('a typed unit is looked at', () => {
	expect(fittingUnit('µV', 'V')).toEqual({ text: 'uV', label: 'µV' });
	expect(fittingUnit('V/kohm', 'A')).toEqual({ text: 'V/kohm', label: 'V/kΩ' });
	expect(fittingUnit('A', 'V')).toMatch(/cannot express/);
	expect(fittingUnit('%', 'V')).toMatch(/cannot express/);
	for (const typed of ['', '!', 'volts per', 'x', '2 V']) {
		expect(fittingUnit(typed, 'V'), typed).toMatch(/no unit/);
	}
});
