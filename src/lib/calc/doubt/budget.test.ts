import { expect, test } from 'vitest';
import { budgetOf } from './budget';
import type { Propagated } from './propagate';

const line = (gradient: number[]): Propagated => ({
	value: 1,
	support: Int32Array.from(gradient, (_, i) => i),
	gradient: Float64Array.from(gradient),
	remarks: 0,
});
const doubts = { uncertainties: [1, 1, 1, 1], dofs: [Infinity, Infinity, Infinity, Infinity] };
const placesOf = (gradient: number[]) => budgetOf(line(gradient), doubts).places;

test('the order of a budget is its own, whichever came before', () => {
	expect(placesOf([1, 2, 3, 4])).toEqual([3, 2, 1, 0]);
	expect(placesOf([2, -2, 1, 2])).toEqual([0, 1, 3, 2]);
	expect(placesOf([1, 1, 1])).toEqual([0, 1, 2]);
	expect(placesOf([4, 3, 2, 1])).toEqual([0, 1, 2, 3]);
	expect(placesOf([2, -2, 1, 2])).toEqual([0, 1, 3, 2]);
});

test('a budget of more inputs than any before has all of them, and its shares add up to one', () => {
	const many = Array.from({ length: 300 }, (_, i) => 1 + (i % 7));
	const uncertainties = many.map(() => 0.1);
	const { places, shares } = budgetOf(line(many), { uncertainties, dofs: uncertainties });
	expect(new Set(places).size).toBe(300);
	expect(shares.reduce((sum, share) => sum + share, 0)).toBeCloseTo(1, 12);
	expect(shares).toEqual(shares.toSorted((x, y) => y - x));
});
