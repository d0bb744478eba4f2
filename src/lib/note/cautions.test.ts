import { expect, test } from 'vitest';
import { defaultOptions, evaluate } from '$lib/calc/evaluate';
import { cautionsOf } from './cautions';
import type { NoteCell } from './document';

/** Texts of the cautions of a note with one calculation and one text. */
function cautions(calculation: string, text = ''): string[] {
	const cells: NoteCell[] = [
		{ id: 'c', kind: 'calculation', source: calculation },
		{ id: 't', kind: 'text', source: text },
	];
	const results = evaluate(cells, defaultOptions);
	return cautionsOf({ title: '', cells }, results).map((one) => one.text.replaceAll('\u00a0', ' '));
}

// IEC 62368-1:2018, 5.2.2.2, table 4, ES1: 60 V DC, 30 V rms, 42.4 V peak.
test.each([
	['V_bus = 60 V', 0],
	['V_bus = 60.1 V', 1],
	['V_bus = -61 V', 1],
	['V_bus = 0.061 kV', 1],
	['V_bus = 59 V\nV_low = 48 V', 0],
	['V_ac = 30 V', 0],
	['V_ac = 31 V', 1],
	['V_out = 31 V # rms', 1],
	['V_out = 31 V # at the gate', 0],
	['V_in_peak = 42.4 V', 0],
	['V_in_peak = 42.5 V', 1],
	['V_pk = 50 V', 1],
	['V_bus = [12 V, 70 V]', 1],
	['V_bus = tolerance(59.9 V, 1 %)', 1],
	['I_bus = 100 A', 0],
	['E_cap = 4 J # stored energy', 1],
	['E_pulse = 4 J # of one pulse', 0],
])('%s: %i', (source, count) => {
	expect(cautions(source)).toHaveLength(count);
});

test('a mains connection and stored energy in the text bring it up, words that only look alike do not', () => {
	expect(cautions('', 'The board hangs on the mains.')).toEqual([
		'The text speaks of a mains connection.',
	]);
	expect(cautions('', 'The capacitor bank stays charged.')).toHaveLength(1);
	expect(cautions('', 'What remains of it; domains and mainstream.')).toEqual([]);
});

test('the caution names the quantity, its figure and the limit', () => {
	expect(cautions('V_bus = 80 V')).toEqual(['V_bus (80 V) is more than 60 V DC.']);
	expect(cautions('V_ac = 230 V')).toEqual(['V_ac (230 V) is more than 30 V AC rms.']);
});
