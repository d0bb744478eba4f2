import { listQuery } from '$lib/schemas/notes';
import { expect, test } from 'vitest';
import { listAddress, sortChange } from './addresses';

const usual = listQuery.parse({});

test('the usual list has the plain address', () => {
	expect(listAddress(usual)).toBe('/notes');
});

test('an address leads back to the query it was made of', () => {
	const query = listQuery.parse({ q: 'R & D 5 %', state: 'not met', sort: 'title', order: 'asc' });
	const { searchParams } = new URL(listAddress(query), 'http://localhost');
	expect(listQuery.parse(Object.fromEntries(searchParams))).toEqual(query);
});

test('a column head turns the order of its own column round and begins another at its top', () => {
	expect(sortChange(usual, 'changed')).toEqual({ order: 'asc' });
	expect(sortChange(usual, 'title')).toEqual({ sort: 'title', order: 'asc' });
	expect(sortChange({ ...usual, sort: 'title' }, 'changed')).toEqual({
		sort: 'changed',
		order: 'desc',
	});
});
