import MailComposer from 'nodemailer/lib/mail-composer';
import SMTPConnection from 'nodemailer/lib/smtp-connection';
import type { Letter } from './letter';

/** What became of handing a mail over. */
export type Handed =
	| { kind: 'sent' }
	/** It did not go; later it may. */
	| { kind: 'later'; reason: string }
	/** The mail server will not take it. */
	| { kind: 'refused'; reason: string }
	/** The connection broke while it was handed over. */
	| { kind: 'unknown'; reason: string };

interface Post extends Letter {
	id: string;
	from: string;
	to: { name: string; address: string };
}

const limitMs = 15_000;

/**
 * Hands one mail to the mail server at an `smtp://` or `smtps://` address, with the person's name and password in it
 * where it wants them. Never throws for what the server or the network does.
 */
export async function carry(smtpUrl: string, post: Post): Promise<Handed> {
	const connection = new SMTPConnection(connectionOf(smtpUrl));
	const broken = new Promise<never>((_, reject) => connection.once('error', reject));
	broken.catch(() => undefined);
	try {
		await Promise.race([broken, opened(connection, smtpUrl)]);
	} catch (error) {
		connection.close();
		return { kind: 'later', reason: wordsOf(error) };
	}
	const message = await new MailComposer(messageOf(post)).compile().build();
	const envelope = { from: addressIn(post.from), to: [post.to.address] };
	try {
		await Promise.race([
			broken,
			new Promise<void>((resolve, reject) =>
				connection.send(envelope, message, (error) => (error ? reject(error) : resolve())),
			),
		]);
		connection.quit();
		return { kind: 'sent' };
	} catch (error) {
		connection.close();
		const code = (error as { responseCode?: number }).responseCode;
		const reason = wordsOf(error);
		// What the server says is known; what a broken line has let through is not.
		if (code === undefined) return { kind: 'unknown', reason };
		return code >= 500 ? { kind: 'refused', reason } : { kind: 'later', reason };
	}
}

function connectionOf(smtpUrl: string) {
	const { protocol, hostname, port } = new URL(smtpUrl);
	const secure = protocol === 'smtps:';
	return {
		host: hostname,
		port: Number(port) || (secure ? 465 : 587),
		secure,
		connectionTimeout: limitMs,
		greetingTimeout: limitMs,
		socketTimeout: limitMs,
	};
}

async function opened(connection: SMTPConnection, smtpUrl: string): Promise<void> {
	const { username, password } = new URL(smtpUrl);
	await new Promise<void>((resolve, reject) =>
		connection.connect((error) => (error ? reject(error) : resolve())),
	);
	if (username === '') return;
	const credentials = { user: decodeURIComponent(username), pass: decodeURIComponent(password) };
	await new Promise<void>((resolve, reject) =>
		connection.login({ credentials }, (error) => (error ? reject(error) : resolve())),
	);
}

function messageOf({ id, from, to, subject, text, html, stopUrl }: Post) {
	return {
		// The same for every try, so that a mailbox can tell that it is the same mail.
		messageId: `<${id}@${addressIn(from).split('@')[1] ?? 'localhost'}>`,
		from,
		to,
		subject,
		text,
		html,
		headers: {
			'List-Unsubscribe': `<${stopUrl}>`,
			'List-Unsubscribe-Post': 'List-Unsubscribe=One-Click',
			'Auto-Submitted': 'auto-generated',
		},
	};
}

/** The address in `Name <address>`. */
function addressIn(from: string): string {
	return /<([^>]+)>/.exec(from)?.[1] ?? from.trim();
}

function wordsOf(error: unknown): string {
	return error instanceof Error ? error.message : String(error);
}
