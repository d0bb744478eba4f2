import { sql } from 'drizzle-orm';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { db } from '$lib/server/db/client';
import { Wire } from '../faults/wire';
import { createDatabase, type TestDatabase } from '../support/database';

let database: TestDatabase;
let wire: Wire;

beforeAll(async () => {
	database = await createDatabase();
	const address = new URL(database.url);
	wire = await Wire.open(Number(address.port));
	address.port = String(wire.port);
	process.env.DATABASE_URL = address.href;
});

afterAll(async () => {
	await database.drop();
	await wire.close();
});

const one = () => db().transaction((tx) => tx.execute(sql`select 1 as one`));

test('transactions whose connection is lost at their first word leave the pool whole', async () => {
	await one();
	// More of them than the pool has connections.
	let cut = 0;
	wire.spoil = (link, bytes, toServer) => {
		if (!toServer || !bytes.includes('begin')) return bytes;
		cut += 1;
		link.cut();
		return undefined;
	};
	for (let n = 0; n < 15; n++) await expect(one()).rejects.toThrow();
	expect(cut).toBe(15);
	wire.mend();
	expect((await one()).rows).toEqual([{ one: 1 }]);
});

test('a transaction whose connection is lost on its way fails, and the next one is served', async () => {
	for (let n = 0; n < 12; n++) {
		const lost = db().transaction(async (tx) => {
			for (const link of wire.links) link.cut();
			await tx.execute(sql`select 1`);
		});
		await expect(lost).rejects.toThrow();
	}
	expect((await one()).rows).toEqual([{ one: 1 }]);
});
