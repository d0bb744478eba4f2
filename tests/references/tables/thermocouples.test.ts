import { isRefusal } from '$lib/calc/tables/refusal';
import {
	thermocoupleTemperature,
	thermocoupleType,
	thermocoupleVoltage,
} from '$lib/calc/tables/thermocouples';
import { describe, expect, it } from 'vitest';
import { findCase } from '$lib/proof/cases';
import { valueOf } from './cases';

// NIST Monograph 175 / SRD 60 (ITS-90): what the printed tables say of the whole range.

describe.each([
	{ type: 'K', from: -270, to: 1372 },
	{ type: 'T', from: -270, to: 400 },
	{ type: 'J', from: -210, to: 1200 },
	{ type: 'N', from: -270, to: 1300 },
	{ type: 'S', from: -50, to: 1768.1 },
] as const)('type $type', ({ type, from, to }) => {
	const table = findCase(`its90-type-${type.toLowerCase()}`).figures;

	it('comes back to the same temperature within a nanokelvin all over the table', () => {
		for (let step = 0; step <= 2_000; step++) {
			const t = from + ((to - from) * step) / 2_000;
			const back = valueOf(thermocoupleTemperature(type, valueOf(thermocoupleVoltage(type, t))));
			expect(Math.abs(back - t), `${t} °C`).toBeLessThan(1e-9);
		}
	});

	it('rises all the way, with the slope that it reports', () => {
		let before = -Infinity;
		for (let step = 1; step < 2_000; step++) {
			const t = from + ((to - from) * step) / 2_000;
			const here = thermocoupleVoltage(type, t);
			const value = valueOf(here);
			expect(value).toBeGreaterThan(before);
			before = value;
			if (isRefusal(here)) throw new Error(here.message);
			const next = valueOf(thermocoupleVoltage(type, t + 1e-4));
			const last = valueOf(thermocoupleVoltage(type, t - 1e-4));
			expect(Math.abs((next - last) / 2e-4 / here.derivatives[0]! - 1)).toBeLessThan(1e-5);
		}
	});

	it('reads the printed voltages of its ends back and refuses what lies beyond', () => {
		for (const point of [table[0]!, table.at(-1)!])
			expect(isRefusal(thermocoupleTemperature(type, Number(point.published)))).toBe(false);
		expect(isRefusal(thermocoupleVoltage(type, from - 0.01))).toBe(true);
		expect(isRefusal(thermocoupleVoltage(type, to + 0.01))).toBe(true);
		expect(isRefusal(thermocoupleTemperature(type, -9))).toBe(true);
		expect(isRefusal(thermocoupleTemperature(type, 100))).toBe(true);
		expect(isRefusal(thermocoupleTemperature(type, NaN))).toBe(true);
	});
});

it('agrees with the published approximate inverse of type K within its stated error', () => {
	// NIST SRD 60, inverse coefficients, 0 to 500 °C: −0.05 to 0.04 °C (error from memory, recomputed).
	const d = [0, 25.08355, 0.07860106, -0.2503131, 0.0831527, -0.01228034];
	d.push(0.0009804036, -4.41303e-5, 1.057734e-6, -1.052755e-8);
	for (let e = 0; e <= 20.644; e += 0.05) {
		const approximate = d.reduceRight((sum, coefficient) => sum * e + coefficient, 0);
		const off = approximate - valueOf(thermocoupleTemperature('K', e));
		expect(off).toBeGreaterThan(-0.05);
		expect(off).toBeLessThan(0.04);
	}
});

it('adds voltages, not temperatures, for a reference junction at 25 °C (recomputed)', () => {
	const reference = valueOf(thermocoupleVoltage('K', 25));
	const t = valueOf(thermocoupleTemperature('K', 10 + reference));
	expect(t).toBeCloseTo(270.713685166, 8);
});

it('takes a voltage inside the jump at 760 °C of type J for that temperature', () => {
	const below = valueOf(thermocoupleVoltage('J', 760));
	expect(valueOf(thermocoupleTemperature('J', below + 3e-8))).toBe(760);
});

it('knows which types it knows', () => {
	expect(thermocoupleType('K')).toBe('K');
	const answer = thermocoupleType('constructor');
	expect(isRefusal(answer) && answer.mend).toBe('Types are K, J, T, N and S.');
});
