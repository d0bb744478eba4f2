import { afterAll, beforeAll, expect, test } from 'vitest';
import { everyFault } from './every-fault';
import { runFault } from './fault';
import { watchFlushes } from './flushed';
import { readForm } from './form';
import { judge } from './judge';
import { table, type Told } from './row';
import { keep } from '../support/table';
import { Site } from './site';
import { Spoilt } from './spoilt';
import { Stage } from './stage';
import { until } from './until';

const form = readForm();
const chosen = everyFault.filter(({ id, long }) =>
	form.only.length === 0 ? form.isFull || !long : form.only.includes(id),
);
const told: Told[] = [];
let site: Site;

beforeAll(async () => {
	process.stdout.write(`\nFaults with seed ${form.seed}.\n`);
	site = await Site.open(form.isFull ? { posts: 3, people: 26 } : { posts: 2, people: 14 });
});

afterAll(async () => {
	if (form.isFull)
		keep(
			'faults.json',
			told.map(({ row }) => row),
		);
	process.stdout.write(`\n${table(told)}\n`);
	await site.close();
});

test.each(chosen.map((fault) => [fault.fault, fault] as const))(
	'nothing acknowledged is lost, doubled, invented or different anywhere after: %s',
	async (_, fault) => {
		const { wrong, ...result } = await runFault(site, fault, form);
		told.push(result);
		// The whole takes long; what was wrong is read at once.
		for (const sentence of wrong) process.stdout.write(`${fault.id}: ${sentence}\n`);
		expect(wrong, `replay: npm run faults -- --seed ${form.seed} --only ${fault.id}`).toEqual([]);
		expect(result.row.ok).toBe(true);
	},
	form.isFull ? 15 * 60_000 : 90_000,
);

const wants = (id: string) => form.only.length === 0 || form.only.includes(id);

if (form.isFull && form.only.length === 0)
	test('there were at least 100 kills and 100,000 acknowledged edits', () => {
		const rows = told.map(({ row }) => row).filter(({ id }) => id.endsWith('-killed'));
		const kills = rows.filter(({ id }) => id !== 'evaluator-killed');
		const sum = (key: 'injected' | 'acknowledged') =>
			kills.reduce((total, row) => total + row[key], 0);
		expect(sum('injected')).toBeGreaterThanOrEqual(100);
		expect(sum('acknowledged')).toBeGreaterThanOrEqual(100_000);
	});

if (wants('flush'))
	test('the log is flushed to disk before an acknowledgement leaves the process', async () => {
		const { edits, early, reason } = await watchFlushes(site, form.isFull, form.seed);
		if (reason) process.stdout.write(`Seen by the position of the log only: ${reason}.\n`);
		expect(edits).toBeGreaterThanOrEqual(8);
		expect(early).toEqual([]);
	}, 90_000);

if (wants('liar'))
	test('a database that forgets what it has committed is found out', async () => {
		const stage = await Stage.open(site, form.isFull, form.seed, { notes: 1, writers: 2 });
		const spoilt = new Spoilt(stage.random);
		for (const { back } of site.posts) back.spoil = spoilt.forgetCommits;
		const edit = stage.writers[0]?.append(stage.random);
		await until(() => edit?.acknowledged, 20_000);
		const [evidence] = await stage.evidence(500);
		stage.destroy();
		for (const post of site.posts) await site.kill(post);
		await site.mend();
		expect(evidence && judge(evidence).lost).toEqual([edit?.value]);
	}, 90_000);
