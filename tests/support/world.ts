import * as threads from '$lib/server/comments/threads';
import type { Actor } from '$lib/server/auth/access';
import * as apiTokens from '$lib/server/auth/api-tokens';
import { db } from '$lib/server/db/client';
import { mail } from '$lib/server/db/schema/mail';
import * as stopTokens from '$lib/server/mail/stop-token';
import * as revisions from '$lib/server/revisions/revisions';
import * as keptTrials from '$lib/server/trial/kept-trials';
import type { Said } from '$lib/schemas/mail';
import { may } from '$lib/schemas/role';
import * as links from '$lib/server/sharing/links';
import { check, freeze, propose, seen, writeNote } from './note-life';
import { testPassword as password, type Cast } from './people';

/** A note made for one visit, with what a form or address may need of it. */
export interface Scene {
	number: string;
	cellId: string;
	threadId: string;
	digest: string;
	/** Of revision A, where it is frozen. */
	revisionDigest: string;
	/** A link to revision A that asks for a password. */
	link: { id: string; token: string };
	/** Somebody in the note's team whose role may be changed. */
	personId: string;
	email: string;
	/** A token of the visitor's. */
	tokenId: string;
	/** A trial that the visitor keeps, or somebody else where they may keep none. */
	keptTrialId: string;
	/** A mail of the note's team that did not go out. */
	unsentMailId: string;
	/** What stops mail to the visitor. */
	stopToken: string;
}

type Stage = 'draft' | 'proposed' | 'checked' | 'frozen';

/** Brings a new note of the cast's author to a stage. */
export async function stage(cast: Cast, upTo: Stage, visitor: Actor): Promise<Scene> {
	const { number } = await writeNote(cast.author, secretTitle);
	const own = visitor.teamId === cast.author.teamId && may(visitor.role, 'readWorkingCopy');
	const changes = [{ name: 'V_in', from: '10 V', to: '11 V' }];
	const scene: Scene = {
		number,
		cellId: 'abcdefghjkmn',
		threadId: '',
		digest: '0'.repeat(64),
		revisionDigest: '0'.repeat(64),
		link: { id: '', token: '' },
		personId: cast.reader.personId,
		email: visitor.email,
		tokenId: (await apiTokens.create(visitor, { name: 'Bench', days: 1 })).id,
		keptTrialId: (
			await keptTrials.keep(own ? visitor : cast.author, number, { title: 'More', changes })
		).id,
		unsentMailId: await unsentMail(cast.author),
		stopToken: stopTokens.make({ ...visitor, kind: 'returns' }),
	};
	const body = 'Is this the loaded value?';
	const about = { cellId: scene.cellId, kind: 'question', blocking: false, body } as const;
	scene.threadId = (await threads.open(cast.engineer, number, about)).id;
	if (upTo === 'draft') return scene;
	if (upTo === 'frozen') await freeze(cast, number);
	else await propose(cast.author, number);
	if (upTo === 'checked') await check(cast, number);
	if (upTo === 'frozen') {
		scene.revisionDigest = (await revisions.get(cast.author, number, 'A')).revision.digest;
		const link = { name: 'The buyers', days: 30, password };
		scene.link = await links.create(cast.author, number, 'A', link);
	}
	scene.digest = (await seen(cast.author, number)).digest;
	return scene;
}

async function unsentMail({ teamId, personId }: Actor): Promise<string> {
	const row = { teamId, personId, kind: 'requests', state: 'failed', said: [] as Said[] } as const;
	const [made] = await db()
		.insert(mail)
		.values({ ...row, key: crypto.randomUUID() })
		.returning({ id: mail.id });
	return made?.id ?? '';
}

/** What a stranger or another team must never see. */
export const secretTitle = 'Kestrel divider';

/** The fields of a sign-off. */
export function signing({ digest }: Scene) {
	return { password, digest };
}
