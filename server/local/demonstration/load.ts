import type { Actor } from '$lib/server/auth/access';
import * as sessions from '$lib/server/auth/sessions';
import * as threads from '$lib/server/comments/threads';
import { db } from '$lib/server/db/client';
import { team } from '$lib/server/db/schema/people';
import { current } from '$lib/server/evaluation/store';
import * as notes from '$lib/server/notes/notes';
import * as candidates from '$lib/server/revisions/candidates';
import type { Proposal } from '$lib/server/revisions/proposal';
import * as revisions from '$lib/server/revisions/revisions';
import { withdraw } from '$lib/server/revisions/withdraw';
import * as links from '$lib/server/sharing/links';
import * as teams from '$lib/server/teams/teams';
import { eq } from 'drizzle-orm';
import { batteryVoltage, widened } from './battery-voltage';
import { chargeCurrent } from './charge-current';
import { rewrite } from './edit';
import { floodSiren } from './flood-siren';
import { levelTransmitter } from './level-transmitter';
import { accounts, firm } from './people';
import type { Sheet } from './sheet';
import { supplySupervisor } from './supply-supervisor';
import { waterTemperature } from './water-temperature';

type Cast = Record<keyof typeof accounts, Actor>;

/** Loads the demonstration into the database through the product's own deeds, unless its team is there. */
export async function load(): Promise<void> {
	const [there] = await db().select({ id: team.id }).from(team).where(eq(team.name, firm));
	if (there) return;
	const cast = await hire();
	await battery(cast);
	await level(cast);
	await supervisor(cast);
	await charge(cast);
	await temperature(cast);
	await siren(cast);
}

async function hire(): Promise<Cast> {
	const { personIds } = await teams.found(firm, Object.values(accounts));
	const entries = Object.keys(accounts).map(async (key, index) => {
		const member = await sessions.findMember(personIds[index] ?? '');
		if (!member) throw new Error(`${key} did not join the team`);
		return [key, member] as const;
	});
	return Object.fromEntries(await Promise.all(entries)) as Cast;
}

async function battery({ engineer, peer, approver }: Cast): Promise<void> {
	const { id, number } = await write(engineer, batteryVoltage);
	await freeze(number, engineer, peer, approver, { purpose: 'First series of the station' });
	await rewrite(id, engineer, widened);
	await freeze(number, engineer, peer, approver, {
		purpose: 'Stations with the new charge regulator',
		changes: 'The range ends at 32 V: the new regulator equalises with up to 31.2 V.',
	});
	await links.create(engineer, number, 'B', {
		name: 'Rig builders of the station',
		days: 365,
		password: '',
	});
}

async function level({ engineer, approver }: Cast): Promise<void> {
	const { number } = await write(engineer, levelTransmitter);
	await propose(engineer, number, { purpose: 'Prototype of the level board' });
	const { password } = accounts.approver;
	await candidates.sendBack(approver, number, {
		password,
		digest: await digestOf(approver, number),
		reason:
			'The transmitter reports a fault with 21.5 mA. The converter would be at its end by then and could not tell it from a flood. Take a smaller loop resistor and add that requirement.',
	});
}

async function supervisor({ peer }: Cast): Promise<void> {
	await write(peer, supplySupervisor);
}

/** Frozen once, then withdrawn. */
async function siren({ engineer, peer, approver }: Cast): Promise<void> {
	const { number } = await write(engineer, floodSiren);
	await freeze(number, engineer, peer, approver, { purpose: 'Flood siren, trial at two stations' });
	const { revision } = await revisions.get(approver, number, 'A');
	await withdraw(approver, number, 'A', {
		password: accounts.approver.password,
		digest: revision.digest,
		reason:
			'The siren of the trial was replaced by one for 24 V. Nothing charges a capacitor to 80 V any more.',
	});
}

async function charge({ engineer, peer, approver }: Cast): Promise<void> {
	const { id, number } = await write(engineer, chargeCurrent);
	const { cells } = (await current(id)).content;
	await propose(engineer, number, {
		purpose: 'Release of the charge board',
		checkers: [peer.personId],
		approver: approver.personId,
		due: '2026-12-18',
	});
	const question = await threads.open(peer, number, {
		cellId: cells[4]?.id ?? '',
		kind: 'question',
		blocking: true,
		body: '@Pia Ekdahl, is 15 µV the offset at 25 °C or over the whole range of temperature? The box reaches 60 °C beside the panel.',
	});
	await threads.reply(engineer, number, question.id, {
		body: 'At 25 °C. Its drift is 0.1 µV/K, so 35 K add 3.5 µV. I will put it in if you send the note back.',
		answers: true,
	});
	const remark = await threads.open(peer, number, {
		cellId: cells[2]?.id ?? '',
		kind: 'remark',
		blocking: false,
		body: 'The 3 W of the shunt hold up to 70 °C only. Enough here.',
	});
	await threads.setClosed(engineer, number, remark.id, true);
}

async function temperature({ peer, engineer }: Cast): Promise<void> {
	const { id, number } = await write(peer, waterTemperature);
	const { cells } = (await current(id)).content;
	await threads.open(engineer, number, {
		cellId: cells[6]?.id ?? '',
		kind: 'remark',
		blocking: false,
		body: 'In running water the dissipation is several times larger, so the self-heating given here is the worst of it.',
	});
}

async function write(author: Actor, sheet: Sheet): Promise<{ id: string; number: string }> {
	const made = await notes.create(author, sheet);
	await current(made.id);
	return made;
}

async function freeze(
	number: string,
	author: Actor,
	checker: Actor,
	approver: Actor,
	said: Partial<Proposal>,
) {
	await propose(author, number, said);
	const { password } = accounts.peer;
	const digest = await digestOf(checker, number);
	await candidates.check(checker, number, { password, digest });
	await candidates.approve(approver, number, { password, digest, acknowledged: true });
}

async function propose(author: Actor, number: string, said: Partial<Proposal>): Promise<void> {
	const { password } = accounts.engineer;
	const nothing = { purpose: '', changes: '', checkers: [], approver: '', due: '' };
	await candidates.propose(author, number, { ...nothing, ...said, password });
}

async function digestOf(actor: Actor, number: string): Promise<string> {
	return (await candidates.get(actor, number)).candidate.digest;
}
