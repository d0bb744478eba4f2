import { readFileSync } from 'node:fs';
import { expect, test } from 'vitest';
import { personColour } from '$lib/protocol/person-colour';

const css = readFileSync('src/app.css', 'utf8');
const darkAt = css.indexOf('prefers-color-scheme: dark');
const light = tokens(css.slice(0, darkAt));
const schemes = { light, dark: { ...light, ...tokens(css.slice(darkAt, css.indexOf('@theme'))) } };

const text: [string, string[]][] = [
	['ink', ['bench', 'sheet', 'petrol-soft', 'fail-soft', 'pass-soft', 'undecided-soft']],
	['ink-soft', ['bench', 'sheet', 'bench-deep', 'petrol-soft']],
	['ink-faint', ['bench', 'sheet']],
	['petrol', ['bench', 'sheet', 'petrol-soft', 'undecided-soft']],
	['sheet', ['petrol']],
	['readout-ink', ['readout']],
	['pass', ['pass-soft', 'sheet']],
	['fail', ['fail-soft', 'sheet']],
	['undecided', ['undecided-soft', 'sheet']],
];
const marks: [string, string[]][] = [
	['edge', ['bench', 'sheet']],
	['focus', ['bench', 'sheet']],
	['pass', ['sheet']],
	['fail', ['sheet']],
	['undecided', ['sheet']],
];

// 4.5 : 1 for text and 3 : 1 for marks: WCAG 2.2, success criteria 1.4.3 and 1.4.11.
for (const [scheme, colours] of Object.entries(schemes)) {
	for (const [pairs, least] of [[text, 4.5] as const, [marks, 3] as const]) {
		for (const [fore, grounds] of pairs) {
			for (const ground of grounds) {
				test(`${scheme}: ${fore} on ${ground} has at least ${least} : 1`, () => {
					expect(contrast(colours[fore]!, colours[ground]!)).toBeGreaterThanOrEqual(least);
				});
			}
		}
	}
}

test("a person's colour carries white letters and stands out from every ground", () => {
	const colours = new Set(Array.from({ length: 200 }, (_, index) => personColour(`p-${index}`)));
	expect(colours.size).toBeGreaterThan(4);
	for (const colour of colours) {
		expect(contrast('#ffffff', colour)).toBeGreaterThanOrEqual(4.5);
		for (const { sheet, bench } of Object.values(schemes)) {
			expect(contrast(sheet!, colour)).toBeGreaterThanOrEqual(3);
			expect(contrast(bench!, colour)).toBeGreaterThanOrEqual(3);
		}
	}
});

function tokens(part: string): Record<string, string> {
	const found = part.matchAll(/--([\w-]+): (#[0-9a-f]{6});/g);
	return Object.fromEntries(Array.from(found, ([, name, colour]) => [name!, colour!]));
}

/** Contrast ratio as WCAG 2.2 defines it. */
function contrast(a: string, b: string): number {
	const [low, high] = [luminance(a), luminance(b)].sort((x, y) => x - y) as [number, number];
	return (high + 0.05) / (low + 0.05);
}

function luminance(colour: string): number {
	const [red, green, blue] = [1, 3, 5].map((at) => {
		const share = parseInt(colour.slice(at, at + 2), 16) / 255;
		return share <= 0.04045 ? share / 12.92 : ((share + 0.055) / 1.055) ** 2.4;
	}) as [number, number, number];
	return 0.2126 * red + 0.7152 * green + 0.0722 * blue;
}
