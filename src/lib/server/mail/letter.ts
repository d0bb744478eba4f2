import type { MailKind, Said } from '$lib/schemas/mail';
import { env } from '../env';
import * as stopTokens from './stop-token';
import { wordingOf, type Wording } from './wording';

/** A mail with its header, as text and as HTML that says the same. */
export interface Letter {
	subject: string;
	text: string;
	html: string;
	/** Where it is stopped by one click (RFC 8058). */
	stopUrl: string;
}

const kindWords: Record<MailKind, string> = {
	requests: 'candidates to check or approve',
	returns: 'returned candidates',
	revisions: 'frozen and withdrawn revisions',
	mentions: 'mentions',
	reminders: 'due days',
};

interface Addressee {
	teamId: string;
	personId: string;
	name: string;
	kind: MailKind | 'daily';
}

/** Makes the letter of one thing, or of what was gathered in a day. */
export function letterOf(
	said: readonly Said[],
	{ teamId, personId, name, kind }: Addressee,
): Letter {
	const { ORIGIN } = env();
	const parts = said.map(wordingOf);
	const [only] = parts;
	const subject =
		kind === 'daily' || parts.length !== 1 || !only
			? `Halfdigit: ${parts.length} ${parts.length === 1 ? 'thing' : 'things'} since yesterday`
			: only.subject;
	const stopUrl = `${ORIGIN}/mail/stop?${new URLSearchParams({ token: stopTokens.make({ teamId, personId, kind }) }).toString()}`;
	const why =
		kind === 'daily'
			? 'You get this once a day, because you chose so.'
			: `You get mail about ${kindWords[kind]}.`;
	return {
		subject,
		text: textOf(parts, { name, why, stopUrl, ORIGIN }),
		html: htmlOf(parts, { subject, name, why, stopUrl, ORIGIN }),
		stopUrl,
	};
}

interface Frame {
	name: string;
	why: string;
	stopUrl: string;
	ORIGIN: string;
}

const linesOf = ({ lines }: Wording) => lines.filter((line) => line.trim() !== '');

function textOf(parts: readonly Wording[], { name, why, stopUrl, ORIGIN }: Frame): string {
	const bodies = parts.map((part) =>
		[...linesOf(part), `${part.link.label}: ${ORIGIN}${part.link.path}`].join('\n\n'),
	);
	return [
		`${name},`,
		bodies.join(`\n\n${'-'.repeat(40)}\n\n`),
		`--\n${why}\nChange how you get mail: ${ORIGIN}/account\nStop this mail: ${stopUrl}\n`,
	].join('\n\n');
}

function htmlOf(
	parts: readonly Wording[],
	{ subject, name, why, stopUrl, ORIGIN }: Frame & { subject: string },
): string {
	const link = (url: string, label: string) =>
		`<a href="${escaped(url)}" style="color:#0c5a61">${escaped(label)}</a>`;
	const bodies = parts.map((part) => {
		const lines = linesOf(part).map(
			(line) => `<p style="margin:0 0 12px;white-space:pre-line">${escaped(line)}</p>`,
		);
		const to = link(`${ORIGIN}${part.link.path}`, part.link.label);
		return `${lines.join('\n')}\n<p style="margin:0 0 12px">${to}</p>`;
	});
	return `<!doctype html>
<html lang="en"><head><meta charset="utf-8"><title>${escaped(subject)}</title></head>
<body style="margin:0;padding:24px;background:#ffffff;color:#14211f;font:15px/1.5 sans-serif">
<div style="max-width:560px">
<p style="margin:0 0 12px">${escaped(name)},</p>
${bodies.join('\n<hr style="border:0;border-top:1px solid #d5dedb;margin:0 0 12px">\n')}
<p style="margin:24px 0 0;padding-top:8px;border-top:1px solid #d5dedb;color:#4a5d59;font-size:13px">
${escaped(why)} ${link(`${ORIGIN}/account`, 'Change how you get mail')} · ${link(stopUrl, 'Stop this mail')}</p>
</div></body></html>
`;
}

const entities: Record<string, string> = {
	'&': '&amp;',
	'<': '&lt;',
	'>': '&gt;',
	'"': '&quot;',
	"'": '&#39;',
};

function escaped(text: string): string {
	return text.replace(/[&<>"']/g, (character) => entities[character] ?? '');
}
