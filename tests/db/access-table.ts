import { testPassword as password } from '../support/people';
import { signing, type Scene } from '../support/world';

/** Who visits: a stranger, each role in the note's team, its author, and an approver of another team. */
export const visitors = [
	'stranger',
	'reader',
	'engineer',
	'approver',
	'administrator',
	'author',
	'outsider',
] as const;
export type Visitor = (typeof visitors)[number];

interface Row {
	stage?: 'draft' | 'proposed' | 'checked' | 'frozen';
	/** Address for a scene; the route's own where it has no parameters. */
	at?: (scene: Scene) => string;
	form?: (scene: Scene) => Record<string, string>;
	json?: (scene: Scene) => unknown;
	/** Asked as a script does: with a token, without a cookie and an origin. */
	script?: true;
	/** Status for each visitor; `all` is every visitor who has no own entry. */
	expect: Partial<Record<Visitor, number>> & { all: number };
}

const page = (tail = '') => ({ at: ({ number }: Scene) => `/notes/${number}${tail}` });
const api = (tail: (scene: Scene) => string) => ({
	at: (scene: Scene) => `/api/notes/${scene.number}${tail(scene)}`,
});
const signIn = 303;

/**
 * Every route and action with who gets what. 303 is a redirect: for a stranger to the sign-in page, else to what was made.
 * A note of another team gives 404, as one that does not exist.
 */
export const accessTable: Record<string, Row> = {
	'GET /': { expect: { all: 303 } },
	'GET /healthz': { expect: { all: 200 } },
	'GET /handbook/proof': { expect: { all: 200 } },
	'GET /sign-in': { expect: { stranger: 200, all: 303 } },
	'POST /sign-in': {
		form: ({ email }) => ({ email, password, to: '/notes' }),
		expect: { all: 303 },
	},
	'GET /desk': { expect: { stranger: signIn, reader: 403, all: 200 } },
	'POST /account?/mail': {
		form: () => ({
			requests: 'at once',
			returns: 'never',
			revisions: 'once a day',
			mentions: 'at once',
			reminders: 'at once',
		}),
		expect: { stranger: signIn, all: 200 },
	},
	'GET /mail/stop': { expect: { all: 200 } },
	'POST /mail/stop': {
		at: ({ stopToken }) => `/mail/stop?token=${stopToken}`,
		form: () => ({}),
		expect: { all: 200 },
	},
	'GET /team/mail': { expect: { stranger: signIn, administrator: 200, all: 403 } },
	'POST /team/mail?/again': {
		form: ({ unsentMailId }) => ({ id: unsentMailId }),
		expect: { stranger: signIn, administrator: 200, all: 403 },
	},
	'POST /team/mail?/drop': {
		form: ({ unsentMailId }) => ({ id: unsentMailId }),
		expect: { stranger: signIn, administrator: 200, all: 403 },
	},
	'GET /sign-out': { expect: { all: 303 } },
	'POST /sign-out': { form: () => ({}), expect: { all: 303 } },
	'GET /account': { expect: { stranger: signIn, all: 200 } },
	'POST /account?/password': {
		form: () => ({ present: password, next: 'another plaice in 52 harbours' }),
		expect: { stranger: signIn, all: 200 },
	},
	'POST /account?/signOutEverywhere': { form: () => ({}), expect: { all: 303 } },
	'POST /account?/createToken': {
		form: () => ({ name: 'Bench 4', days: '90' }),
		expect: { stranger: signIn, all: 200 },
	},
	'POST /account?/revokeToken': {
		form: ({ tokenId }) => ({ id: tokenId }),
		expect: { stranger: signIn, all: 200 },
	},
	'GET /team': { expect: { stranger: signIn, administrator: 200, all: 403 } },
	'POST /team?/role': {
		form: ({ personId }) => ({ personId, role: 'engineer' }),
		expect: { stranger: signIn, administrator: 200, all: 403 },
	},
	'GET /team/policy': { expect: { stranger: signIn, all: 200 } },
	'POST /team/policy': {
		form: () => ({ checkers: '1', identifyAfterMinutes: '480' }),
		expect: { stranger: signIn, administrator: 200, all: 403 },
	},
	'GET /team/audit': { expect: { stranger: signIn, administrator: 200, all: 403 } },
	'GET /team/audit/export': {
		at: () => '/team/audit/export?as=jsonl',
		expect: { stranger: signIn, administrator: 200, all: 403 },
	},
	'GET /notes': { expect: { stranger: signIn, all: 200 } },
	'POST /notes?/create': {
		form: () => ({ title: 'A new one' }),
		expect: { reader: 403, administrator: 403, all: 303 },
	},
	'GET /notes/[number]': {
		...page(),
		expect: { stranger: signIn, reader: 404, outsider: 404, all: 200 },
	},
	'POST /notes/[number]?/propose': {
		...page('?/propose'),
		form: () => ({ password, purpose: 'Release of the board' }),
		// A refused form shows its page again, and this one is none of a reader's.
		expect: { reader: 404, administrator: 403, outsider: 404, all: 303 },
	},
	'GET /notes/[number]/history': {
		...page('/history'),
		expect: { stranger: signIn, reader: 403, outsider: 404, all: 200 },
	},
	'GET /notes/[number]/candidate': {
		stage: 'proposed',
		...page('/candidate'),
		expect: { stranger: signIn, reader: 403, outsider: 404, all: 200 },
	},
	'POST /notes/[number]/candidate?/check': {
		stage: 'proposed',
		...page('/candidate?/check'),
		form: signing,
		expect: { reader: 403, administrator: 403, author: 409, outsider: 404, all: 303 },
	},
	'POST /notes/[number]/candidate?/approve': {
		stage: 'checked',
		...page('/candidate?/approve'),
		form: signing,
		expect: { stranger: signIn, approver: 303, outsider: 404, all: 403 },
	},
	'POST /notes/[number]/candidate?/return': {
		stage: 'checked',
		...page('/candidate?/return'),
		form: (scene) => ({ ...signing(scene), reason: 'The load is missing.' }),
		expect: { reader: 403, administrator: 403, outsider: 404, all: 303 },
	},
	'GET /notes/[number]/revisions/[letter]': {
		stage: 'frozen',
		...page('/revisions/A'),
		expect: { stranger: signIn, outsider: 404, all: 200 },
	},
	'GET /notes/[number]/compare': {
		stage: 'frozen',
		...page('/compare'),
		expect: { stranger: signIn, outsider: 404, all: 200 },
	},
	'POST /notes/[number]/revisions/[letter]?/withdraw': {
		stage: 'frozen',
		...page('/revisions/A?/withdraw'),
		form: (scene) => ({
			password,
			digest: scene.revisionDigest,
			reason: 'The part is wrong.',
		}),
		expect: { stranger: signIn, approver: 303, outsider: 404, all: 403 },
	},
	'POST /notes/[number]/revisions/[letter]?/share': {
		stage: 'frozen',
		...page('/revisions/A?/share'),
		form: () => ({ name: 'The buyers', days: '30', password: '' }),
		expect: { stranger: signIn, reader: 403, outsider: 404, all: 200 },
	},
	'POST /notes/[number]/revisions/[letter]?/revoke': {
		stage: 'frozen',
		...page('/revisions/A?/revoke'),
		form: ({ link }) => ({ id: link.id }),
		expect: { stranger: signIn, reader: 403, outsider: 404, all: 200 },
	},
	'GET /notes/[number]/revisions/[letter]/pdf': {
		stage: 'frozen',
		...page('/revisions/A/pdf'),
		expect: { stranger: signIn, outsider: 404, all: 200 },
	},
	'GET /notes/[number]/revisions/[letter]/file': {
		stage: 'frozen',
		...page('/revisions/A/file'),
		expect: { stranger: signIn, outsider: 404, all: 200 },
	},
	'GET /notes/[number]/revisions/[letter]/again': {
		stage: 'frozen',
		...page('/revisions/A/again'),
		expect: { stranger: signIn, outsider: 404, all: 200 },
	},
	// The link asks everybody for its password, whoever they are.
	'GET /shared/[token]': {
		stage: 'frozen',
		at: ({ link }) => `/shared/${link.token}`,
		expect: { all: 200 },
	},
	'POST /shared/[token]?/unlock': {
		stage: 'frozen',
		at: ({ link }) => `/shared/${link.token}?/unlock`,
		form: () => ({ password: 'not this one' }),
		expect: { all: 403 },
	},
	'GET /shared/[token]/pdf': {
		stage: 'frozen',
		at: ({ link }) => `/shared/${link.token}/pdf`,
		expect: { all: 403 },
	},
	'GET /shared/[token]/file': {
		stage: 'frozen',
		at: ({ link }) => `/shared/${link.token}/file`,
		expect: { all: 403 },
	},
	'GET /r/[digits]': {
		stage: 'frozen',
		at: ({ revisionDigest }) => `/r/${revisionDigest.slice(0, 32)}`,
		expect: { all: 200 },
	},
	'GET /verify': { expect: { all: 200 } },
	'POST /verify': {
		form: () => ({ digest: '0'.repeat(64) }),
		expect: { all: 200 },
	},
	'GET /verify/keys': { expect: { all: 200 } },
	'GET /verify/checkpoint': { stage: 'frozen', expect: { all: 200 } },
	'GET /verify/proof': {
		stage: 'frozen',
		at: () => '/verify/proof?index=0&size=2',
		expect: { all: 200 },
	},
	'GET /api/notes/[number]/threads': {
		...api(() => '/threads'),
		expect: { stranger: 401, reader: 403, outsider: 404, all: 200 },
	},
	'POST /api/notes/[number]/threads': {
		...api(() => '/threads'),
		json: ({ cellId }) => ({ cellId, kind: 'remark', blocking: false, body: 'Noted.' }),
		expect: { stranger: 401, reader: 403, outsider: 404, all: 201 },
	},
	'PATCH /api/notes/[number]/threads/[thread]': {
		...api(({ threadId }) => `/threads/${threadId}`),
		json: () => ({ closed: true }),
		expect: { stranger: 401, reader: 403, outsider: 404, all: 200 },
	},
	'POST /api/notes/[number]/threads/[thread]/comments': {
		...api(({ threadId }) => `/threads/${threadId}/comments`),
		json: () => ({ body: 'It is.' }),
		expect: { stranger: 401, reader: 403, outsider: 404, all: 201 },
	},
	'GET /api/notes/[number]/people': {
		...api(() => '/people'),
		expect: { stranger: 401, reader: 403, outsider: 404, all: 200 },
	},
	'GET /api/notes/[number]/history': {
		...api(() => '/history'),
		expect: { stranger: 401, reader: 403, outsider: 404, all: 200 },
	},
	'GET /api/notes/[number]/history/[seq]': {
		...api(() => '/history/1'),
		expect: { stranger: 401, reader: 403, outsider: 404, all: 200 },
	},
	'GET /api/notes/[number]/review': {
		...api(() => '/review'),
		expect: { stranger: 401, reader: 403, outsider: 404, all: 200 },
	},
	'GET /api/notes/[number]/quantities/[name]': {
		...api(() => '/quantities/V_out'),
		expect: { stranger: 401, reader: 403, outsider: 404, all: 200 },
	},
	'POST /api/notes/[number]/trials': {
		...api(() => '/trials'),
		// The quantity is exact, which is said to those only who may know of it.
		json: () => ({ quantity: 'V_out', adaptive: false }),
		expect: { stranger: 401, reader: 403, outsider: 404, all: 400 },
	},
	'GET /api/notes/[number]/quantities/[name]/units': {
		...api(() => '/quantities/V_out/units?typed=mV'),
		expect: { stranger: 401, reader: 403, outsider: 404, all: 200 },
	},
	'GET /api/notes/[number]/trial': {
		...api(() => '/trial'),
		expect: { stranger: 401, reader: 403, outsider: 404, all: 200 },
	},
	'POST /api/notes/[number]/trial': {
		...api(() => '/trial'),
		json: () => ({ changes: [{ name: 'V_in', from: '10 V', to: '11 V' }] }),
		expect: { stranger: 401, reader: 403, outsider: 404, all: 200 },
	},
	'GET /api/notes/[number]/kept-trials': {
		...api(() => '/kept-trials'),
		expect: { stranger: 401, reader: 403, outsider: 404, all: 200 },
	},
	'POST /api/notes/[number]/kept-trials': {
		...api(() => '/kept-trials'),
		json: () => ({ title: 'More', changes: [{ name: 'V_in', from: '10 V', to: '11 V' }] }),
		expect: { stranger: 401, reader: 403, outsider: 404, all: 201 },
	},
	'DELETE /api/notes/[number]/kept-trials/[trial]': {
		...api(({ keptTrialId }) => `/kept-trials/${keptTrialId}`),
		json: () => ({}),
		expect: { stranger: 401, reader: 403, outsider: 404, all: 200 },
	},
	'GET /api/v1/notes/[number]': {
		script: true,
		at: ({ number }) => `/api/v1/notes/${number}`,
		expect: { stranger: 401, reader: 404, outsider: 404, all: 200 },
	},
	'GET /api/v1/notes/[number]/comparison': {
		script: true,
		stage: 'frozen',
		at: ({ number }) => `/api/v1/notes/${number}/comparison?from=A&to=A`,
		expect: { stranger: 401, outsider: 404, all: 200 },
	},
	'POST /api/v1/evaluate': {
		script: true,
		json: () => ({ cells: [{ id: 'c1', kind: 'calculation', source: 'V = 3 V' }] }),
		expect: { stranger: 401, all: 200 },
	},
};
