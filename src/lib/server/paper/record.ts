import { moment } from '$lib/components/time';
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
		closed: string;
		comments: { name: string; time: string; body: string }[];
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
		threads: revision.review.map(({ cellId, kind, blocking, closed, comments }) => ({
			terminal: terminals.get(cellId) ?? 0,
			kind,
			blocking,
			closed: closed ? `closed by ${visible(closed.by)}, ${moment(closed.at)}` : '',
			comments: comments.map(({ person, at, body }) => ({
				name: visible(person.name),
				time: moment(at),
				body: visible(body),
			})),
		})),
		timeSource: statements[0]?.timeSource ?? '',
		keyId: revision.signatures[0]?.keyId ?? '',
	};
}

/** "14 Oct 2026, 09:12:03 UTC" */
function exact(time: string): string {
	return moment(time).replace(/\d\d:\d\d(?= UTC)/, new Date(time).toISOString().slice(11, 19));
}
