import { createServer } from 'node:http';
import { simpleParser } from 'mailparser';
import { SMTPServer } from 'smtp-server';
import { firstFree } from './ports.mjs';

/**
 * @typedef {{ id: string, from: string, to: string, subject: string, text: string, html: string, headers: string[], at: Date }} Kept
 * @typedef {{ smtpUrl: string, pageUrl: string, mails: Kept[], close: () => Promise<void> }} MailSink
 */

const most = 500;

/**
 * A mail server that keeps what it gets in memory and hands nothing on, with a page that shows it. Both listen on the
 * loopback address only.
 * @param {{ firstPort?: number, onMail?: () => Promise<void> }} [options] `onMail` is awaited before a mail is taken
 * @returns {Promise<MailSink>}
 */
export async function openMailSink({ firstPort = 4573, onMail } = {}) {
	/** @type {Kept[]} */
	const mails = [];
	const smtp = new SMTPServer({
		disabledCommands: ['AUTH', 'STARTTLS'],
		onData: (stream, _session, callback) => {
			simpleParser(stream)
				.then(async (mail) => {
					await onMail?.();
					mails.unshift(kept(mail));
					mails.length = Math.min(mails.length, most);
					callback();
				})
				.catch((/** @type {Error} */ error) => callback(error));
		},
	});
	// Somebody who hangs up in the middle is no reason to end.
	smtp.on('error', () => undefined);
	const smtpPort = await firstFree(firstPort);
	await new Promise((resolve) => smtp.listen(smtpPort, '127.0.0.1', () => resolve(undefined)));
	const pages = createServer((request, response) => {
		response.setHeader('content-security-policy', "default-src 'none'; style-src 'unsafe-inline'");
		response.setHeader('content-type', 'text/html; charset=utf-8');
		const mail = mails.find(({ id }) => `/${id}` === request.url);
		response.end(mail ? whole(mail) : list(mails));
	});
	const pagePort = await firstFree(smtpPort + 1);
	await new Promise((resolve) => pages.listen(pagePort, '127.0.0.1', () => resolve(undefined)));
	return {
		smtpUrl: `smtp://127.0.0.1:${smtpPort}`,
		pageUrl: `http://localhost:${pagePort}`,
		mails,
		close: async () => {
			pages.closeAllConnections();
			pages.close();
			await new Promise((resolve) => smtp.close(() => resolve(undefined)));
		},
	};
}

/**
 * @param {import('mailparser').ParsedMail} mail
 * @returns {Kept}
 */
function kept(mail) {
	const to = Array.isArray(mail.to) ? mail.to.map(({ text }) => text).join(', ') : mail.to?.text;
	return {
		id: crypto.randomUUID(),
		from: mail.from?.text ?? '',
		to: to ?? '',
		subject: mail.subject ?? '',
		text: mail.text ?? '',
		html: mail.html || '',
		headers: mail.headerLines.map(({ line }) => line),
		at: mail.date ?? new Date(),
	};
}

const style = `<style>
	:root { color-scheme: light dark; }
	body { max-width: 760px; margin: 0 auto; padding: 24px 16px; font: 15px/1.5 sans-serif; }
	h1 { font-size: 22px; }
	li, pre { padding: 8px 0; border-top: 1px solid #8886; overflow-wrap: anywhere; white-space: pre-wrap; }
	ul { padding: 0; list-style: none; }
	span { color: light-dark(#4a5d59, #a9bab5); font-size: 13.5px; }
</style>`;

/** @param {Kept[]} mails */
function list(mails) {
	const items = mails.map(
		({ id, to, subject, at }) =>
			`<li><a href="/${id}">${escaped(subject)}</a><br><span>to ${escaped(to)}, ${at.toISOString().slice(0, 16).replace('T', ' ')} UTC</span></li>`,
	);
	const body = items.length > 0 ? `<ul>${items.join('\n')}</ul>` : '<p>No mail has come yet.</p>';
	return page('Mail of the demonstration', `<p>None of it leaves this computer.</p>${body}`);
}

/** @param {Kept} mail */
function whole({ to, from, subject, text, headers }) {
	const said = headers.filter((line) => /^(message-id|list-)/i.test(line)).join('\n');
	const about = `<p>From ${escaped(from)} to ${escaped(to)}</p>`;
	return page(
		subject,
		`<p><a href="/">All mail</a></p>${about}<pre>${linked(text)}</pre><pre>${escaped(said)}</pre>`,
	);
}

/**
 * @param {string} title
 * @param {string} body
 */
function page(title, body) {
	return `<!doctype html><html lang="en"><meta charset="utf-8"><meta name="viewport" content="width=device-width"><title>${escaped(title)}</title>${style}<h1>${escaped(title)}</h1>${body}</html>`;
}

/** @param {string} text */
function linked(text) {
	return escaped(text).replace(/http:\/\/localhost:\d+[^\s<]*/g, '<a href="$&">$&</a>');
}

/** @param {string} text */
function escaped(text) {
	return text.replace(/[&<>"']/g, (character) => `&#${character.charCodeAt(0)};`);
}
