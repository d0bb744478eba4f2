import { platinumResistance, platinumTemperature } from '$lib/calc/tables/platinum';
import { isRefusal } from '$lib/calc/tables/refusal';
import { expect, it } from 'vitest';
import { valueOf } from './cases';

it('comes back to the same temperature within a nanokelvin all over both branches', () => {
	for (let t = -200; t <= 850; t += 0.25) {
		const back = valueOf(platinumTemperature(valueOf(platinumResistance(t, 1000)), 1000));
		expect(Math.abs(back - t)).toBeLessThan(1e-9);
	}
});

it.each([
	[() => platinumResistance(-200.1, 100), 't is outside -200 to 850 °C'],
	[() => platinumResistance(851, 100), 't is outside -200 to 850 °C'],
	[() => platinumTemperature(18, 100), 'r is outside 18.5151 to 390.486 Ω'],
	[() => platinumTemperature(391, 100), 'r is outside 18.5151 to 390.486 Ω'],
	[() => platinumTemperature(NaN, 100), 'r is not a finite number'],
	[() => platinumResistance(20, 0), 'r0 must be above zero'],
])('refuses what the standard does not cover', (compute, message) => {
	const answer = compute();
	expect(isRefusal(answer) && answer.message).toBe(message);
});
