import { describe, expect, it } from 'vitest';
import { caseGroups } from '$lib/proof/cases';
import type { Row } from '$lib/proof/proof';
import { prove } from '$lib/proof/prove';

/** Why a row fails, for the message of the test. */
function failure({ what, published, recomputed, computed, rule, note }: Row): string {
	return `${what}: ${computed} computed, ${published} printed, ${recomputed} recomputed (${rule}) ${note ?? ''}`;
}

const stateable = caseGroups.map(({ title, cases }) => ({
	title,
	cases: cases.filter(({ belowLanguage }) => !belowLanguage),
}));

describe.each(stateable)('$title', ({ cases }) => {
	it.each(cases)('$title: $source.document, $source.locator', (each) => {
		const { rows } = prove(each);
		expect(rows.length).toBeGreaterThan(0);
		expect(rows.filter(({ agrees }) => !agrees).map(failure)).toEqual([]);
	});
});

describe('The published cases', () => {
	const all = stateable.flatMap(({ cases }) => cases);
	const figures = all.flatMap((each) => each.figures);

	it('are all stated in the language but four, which are checked below it', () => {
		const below = caseGroups.flatMap(({ cases }) => cases.filter((each) => each.belowLanguage));
		expect(below.map(({ id }) => id)).toEqual([
			'strd-lin-noint1',
			'strd-lin-noint2',
			'strd-lin-longley',
			'iec60062-letters',
		]);
		expect(figures.length).toBeGreaterThan(1200);
	});

	it('have ids of their own', () => {
		const ids = all.map(({ id }) => id);
		expect(new Set(ids).size).toBe(ids.length);
	});

	it('ask the engine for every figure, and say how each is known', () => {
		for (const { quantity, formula, ask, confirmed } of figures) {
			expect(formula === undefined, quantity).toBe(ask !== undefined);
			expect(confirmed, quantity).not.toBe('');
		}
	});

	it('say why where print and recomputation disagree', () => {
		const disagreeing = figures.filter(({ agrees }) => agrees === false);
		expect(disagreeing.length).toBeGreaterThan(10);
		for (const { quantity, note } of disagreeing) expect(note, quantity).toBeTruthy();
	});
});
