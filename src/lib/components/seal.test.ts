import { expect, test } from 'vitest';
import { bandsOf, grouped } from './seal';

// SHA-256 of "abc": FIPS 180-4, example of one block; recomputed with sha256sum.
const abc = 'ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad';

test('the bands are the first five decimal digits of the digest, letters skipped', () => {
	expect(bandsOf(abc).map((band) => band.digit)).toEqual([7, 8, 1, 6, 8]);
});

test('each digit has its colour after IEC 60062', () => {
	const named = (digits: string) => bandsOf(digits).map((band) => band.name);
	expect(named('01234')).toEqual(['black', 'brown', 'red', 'orange', 'yellow']);
	expect(named('56789')).toEqual(['green', 'blue', 'violet', 'grey', 'white']);
});

test('no two digits are drawn in one shade', () => {
	const shades = [...bandsOf('01234'), ...bandsOf('56789')].map((band) => band.shade);
	expect(new Set(shades).size).toBe(10);
});

test('a digest with fewer decimal digits has fewer bands', () => {
	expect(bandsOf('abcdef7abcdef').map((band) => band.digit)).toEqual([7]);
});

test('a digest is printed in eight groups that join to the whole', () => {
	const groups = grouped(abc).split(' ');
	expect(groups).toHaveLength(8);
	expect(groups.join('')).toBe(abc);
});
