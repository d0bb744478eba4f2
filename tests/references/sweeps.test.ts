import { expect, test } from 'vitest';
import { defaultOptions, evaluate } from '$lib/calc/evaluate';
import table from '$lib/proof/data/temperature.json';

test('a sweep over temperature meets the table of IEC 60751', () => {
	const published = table.cases
		.find(({ id }) => id === 'iec60751-pt100-table')!
		.figures.flatMap(({ formula, published: ohms }) => {
			const celsius = /^pt\((-?\d+) degC, 100 ohm\)$/.exec(formula)?.[1];
			return celsius === undefined ? [] : [{ celsius: Number(celsius), ohms: String(ohms) }];
		});
	expect(published.length).toBeGreaterThan(8);
	const { sweeps } = evaluate(
		[
			{ id: 'a', kind: 'calculation', source: 'Tair = 25 degC\nRt = pt(Tair, 100 ohm)' },
			{ id: 'c', kind: 'curve', source: 'Rt over Tair from -200 °C to 850 °C in 22 points' },
		],
		defaultOptions,
	);
	const { x, series } = sweeps![0]!;
	let met = 0;
	for (const { celsius, ohms } of published) {
		const i = x.indexOf(celsius);
		if (i < 0) continue;
		expect(series[0]!.values[i]!.toFixed(ohms.split('.')[1]!.length)).toBe(ohms);
		met += 1;
	}
	expect(met).toBeGreaterThan(8);
});
