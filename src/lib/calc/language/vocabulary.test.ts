import { expect, test } from 'vitest';
import { vocabulary } from './vocabulary';

// After a change of functions, units or constants: npx vitest run -u src/lib/calc/language/vocabulary.test.ts
test('what editors offer is what the engine knows', async () => {
	const text = `${JSON.stringify(vocabulary(), null, '\t')}\n`;
	await expect(text).toMatchFileSnapshot('./vocabulary.json');
});

test('functions, units and constants are offered with what explains them', () => {
	const { functions, units, constants, series, words } = vocabulary();
	expect(functions.divider).toMatchObject({
		signature: 'divider(Vin, Rupper, Rlower[, Rload])',
		result: '3.188 98 V',
	});
	expect(units.kohm).toEqual({ label: 'kΩ', name: 'kiloohm' });
	expect(units['%']).toEqual({ label: '%', name: 'percent' });
	expect(constants.boltzmann?.value).toMatch(/^1\.380649e-23 J/);
	expect(series.E24).toEqual({ members: 24 });
	expect(words.mod).toBe(true);
	for (const { help, example } of Object.values(functions)) {
		expect(help).not.toBe('');
		expect(example).not.toBe('');
	}
});
