import { expect, test } from 'vitest';
import type { Connection } from './connection';
import { People, type Entry } from './people';

const connectionOf = (personId: string) =>
	({ actor: { personId, name: personId } }) as unknown as Connection;
const remote = (clientId: number, clock: number, personId = 'kim'): Entry => ({
	clientId,
	clock,
	state: { user: { id: personId, name: personId, color: '', colorLight: '' } },
});
const said = (clientId: number, clock: number) => [{ clientId, clock, state: {} }];
const ids = (entries: readonly Entry[]) => entries.map(({ clientId }) => clientId);

test('people of another process are shown once, and again where they changed', () => {
	const people = new People();
	expect(ids(people.hear([remote(1, 1), remote(2, 1)]))).toEqual([1, 2]);
	expect(ids(people.hear([remote(1, 1), remote(2, 2)]))).toEqual([2]);
	expect(people.hear([remote(2, 1)])).toEqual([]);
	expect(ids(people.all())).toEqual([1, 2]);
	expect(people.here()).toEqual([]);
});

test('people of another process are forgotten after 15 s without a word of them', () => {
	const people = new People();
	people.hear([remote(1, 1), remote(2, 1)], 0);
	people.hear([remote(2, 1)], 10_000);
	expect(people.forget(15_001)).toEqual([{ clientId: 1, clock: 1, state: null }]);
	expect(people.forget(15_001)).toEqual([]);
	expect(ids(people.forget(25_001))).toEqual([2]);
});

test('a page that changes the process is one person throughout', () => {
	const people = new People();
	const connection = connectionOf('kim');
	people.take(connection, said(7, 1));
	// It is on another process before its old socket here was found dead.
	expect(ids(people.hear([remote(7, 2)]))).toEqual([7]);
	expect(people.leave(connection)).toEqual([]);
	expect(ids(people.all())).toEqual([7]);
	// It comes back, and the other process says that it has gone from there.
	expect(ids(people.take(connection, said(7, 3)))).toEqual([7]);
	expect(people.hear([{ clientId: 7, clock: 3, state: null }])).toEqual([]);
	expect(people.forget(1e9)).toEqual([]);
	expect(ids(people.here())).toEqual([7]);
});

test('nobody speaks for the client of another person, here or on another process', () => {
	const people = new People();
	people.take(connectionOf('ann'), said(1, 1));
	people.hear([remote(2, 1, 'kim')]);
	const bob = connectionOf('bob');
	expect(people.take(bob, said(1, 9))).toEqual([]);
	expect(people.take(bob, said(2, 9))).toEqual([]);
	expect(ids(people.take(bob, said(3, 1)))).toEqual([3]);
	// And for one client only.
	expect(people.take(bob, said(4, 1))).toEqual([]);
	expect([1, 2, 3, 4].map((id) => people.personOf(id))).toEqual(['ann', 'kim', 'bob', undefined]);
});
