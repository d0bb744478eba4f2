import { changeWords, entriesOf } from '$lib/components/thread-entries';
import { moment } from '$lib/components/time';
import { dispositionOf, type Thread } from '$lib/schemas/comments';
import type { AttachedTrial } from '$lib/schemas/trial';
import { visible } from './glyphs';
import type { SealedContent } from './sealed-content';

const meanings: { readonly [meaning: string]: string } = {
	prepared: 'Prepared',
	checked: 'Checked',
	approved: 'Approved',
	returned: 'Returned',
};

/** Who stood behind it and what was said about it. */
export interface ReviewRecord {
	/** The three fields of the title block; '' where nobody signed. */
	block: { meaning: string; name: string; day: string }[];
	signatures: {
		meaning: string;
		name: string;
		role: string;
		/** With its zone. */
		time: string;
		method: string;
		remarks: string[];
	}[];
	waivers: { by: string; requirement: string; place: string; reason: string }[];
	threads: {
		/** Terminal of the cell, 0 where the cell is not in this revision. */
		terminal: number;
		kind: string;
		blocking: boolean;
		/** Whether it was open when the revision was frozen. */
		open: boolean;
		/** The words it is about, '' where it is about the whole cell. */
		quote: string;
		/** What was said and what became of it; a change has no body. */
		entries: { head: string; body: string; trial: string[] }[];
	}[];
	timeSource: string;
	keyId: string;
}

/** Signatures, waivers and comments of a sealed revision. */
export function recordOf(revision: SealedContent['revision']): ReviewRecord {
	const statements = revision.signatures.map(({ statement }) => statement);
	const terminals = new Map(
		revision.proposal.content.cells.map(({ id }, index) => [id, index + 1]),
	);
	return {
		block: ['prepared', 'checked', 'approved'].map((meaning) => {
			const found = statements.filter((one) => one.meaning === meaning).at(-1);
			return {
				meaning: meanings[meaning] ?? '',
				name: visible(found?.signer.name ?? ''),
				day: found ? moment(found.time).split(',', 1)[0]! : '',
			};
		}),
		signatures: statements.map(({ meaning, signer, time, reason, cautions, waivers }) => ({
			meaning: meanings[meaning] ?? visible(meaning),
			name: visible(signer.name),
			role: visible(signer.role),
			time: exact(time),
			method: 'password',
			remarks: [
				...(reason ? [visible(reason)] : []),
				...(cautions?.length ? ['Caution acknowledged'] : []),
				...(waivers?.length
					? [
							`${waivers.length === 1 ? 'One requirement' : `${waivers.length} requirements`} waived`,
						]
					: []),
			],
		})),
		waivers: statements.flatMap(({ signer, waivers = [] }) =>
			waivers.map(({ requirement, reason, cell, line }) => ({
				by: visible(signer.name),
				requirement: visible(requirement),
				place: `cell ${terminals.get(cell) ?? '–'}, line ${line}`,
				reason: visible(reason),
			})),
		),
		threads: revision.review.map((thread) => ({
			terminal: terminals.get(thread.cellId) ?? 0,
			kind: thread.kind,
			blocking: thread.blocking,
			open: dispositionOf(thread) === 'open',
			quote: visible(thread.anchor?.quote ?? ''),
			entries: entriesIn(thread),
		})),
		timeSource: statements[0]?.timeSource ?? '',
		keyId: revision.signatures[0]?.keyId ?? '',
	};
}

function entriesIn(thread: Thread): ReviewRecord['threads'][number]['entries'] {
	const entries = entriesOf(thread).map((entry) =>
		'comment' in entry
			? {
					head: visible(`${entry.comment.person.name}, ${moment(entry.at)}`),
					body: visible(entry.comment.body),
					trial: entry.comment.trial ? trialLines(entry.comment.trial) : [],
				}
			: { head: visible(`${changeWords(entry.change)}, ${moment(entry.at)}`), body: '', trial: [] },
	);
	const { closed, changes = [] } = thread;
	if (closed && !changes.some(({ what }) => what === 'closed'))
		entries.push({
			head: visible(`Closed by ${closed.by}, ${moment(closed.at)}`),
			body: '',
			trial: [],
		});
	return entries;
}

/** What a trial changes, then what that did to requirements and figures. */
function trialLines({ changes, verdicts, figures }: AttachedTrial): string[] {
	const changed = new Set(changes.map(({ name }) => name));
	return [
		...changes.map(({ name, from, to }) => `Tried: ${name} = ${to} instead of ${from}`),
		...verdicts.map(
			({ requirement, before, after }) =>
				`${requirement}: ${before ? `${before.verdict}, then ` : ''}${after?.text ?? 'no verdict'}`,
		),
		...figures
			.filter(({ name }) => !changed.has(name))
			.map(
				({ name, before, after }) => `${name}: ${before ?? 'no value'} → ${after ?? 'no value'}`,
			),
	].map(visible);
}

/** "14 Oct 2026, 09:12:03 UTC" */
function exact(time: string): string {
	return moment(time).replace(/\d\d:\d\d(?= UTC)/, new Date(time).toISOString().slice(11, 19));
}
