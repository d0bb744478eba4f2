import { request } from 'node:http';
import { env } from '$lib/server/env';
import { sessionCookie } from '$lib/server/auth/cookie';

export interface Answer {
	status: number;
	location: string | undefined;
	cookies: string[];
	headers: Record<string, string | string[] | undefined>;
	body: string;
}

interface Sending {
	body?: string;
	headers?: Record<string, string>;
}

/** Somebody with a browser's manners: sends its cookie, names its origin, follows no redirect. */
export class Visitor {
	readonly #port: number;
	cookie: string | undefined;
	/** A script's token. */
	readonly bearer: string | undefined;

	constructor(port: number, cookie?: string, bearer?: string) {
		this.#port = port;
		this.cookie = cookie;
		this.bearer = bearer;
	}

	get(path: string, headers: Record<string, string> = {}): Promise<Answer> {
		return this.send('GET', path, { headers });
	}

	/** Posts a form as a browser without script does. */
	async post(
		path: string,
		fields: Record<string, string>,
		headers: Record<string, string> = {},
	): Promise<Answer> {
		return this.send('POST', path, {
			body: new URLSearchParams(fields).toString(),
			headers: {
				origin: env().ORIGIN,
				'content-type': 'application/x-www-form-urlencoded',
				accept: 'text/html',
				...headers,
			},
		});
	}

	/** Sends JSON as the pages' own code does. */
	async json(method: string, path: string, body: unknown): Promise<Answer> {
		return this.send(method, path, {
			body: JSON.stringify(body),
			headers: { origin: env().ORIGIN, 'content-type': 'application/json', accept: '*/*' },
		});
	}

	/** Sends exactly this, and keeps the session cookie that comes back. */
	async send(method: string, path: string, { body, headers = {} }: Sending): Promise<Answer> {
		const answer = await exchange(this.#port, method, path, body, {
			...(this.cookie !== undefined && { cookie: this.cookie }),
			...(this.bearer !== undefined && { authorization: `Bearer ${this.bearer}` }),
			...headers,
		});
		const { name } = sessionCookie();
		const set = answer.cookies.findLast((one) => one.startsWith(`${name}=`))?.split(';')[0];
		if (set !== undefined) this.cookie = set === `${name}=` ? undefined : set;
		return answer;
	}
}

function exchange(
	port: number,
	method: string,
	path: string,
	body: string | undefined,
	headers: Record<string, string>,
): Promise<Answer> {
	return new Promise((resolve, reject) => {
		const sent = request(
			{
				host: '127.0.0.1',
				port,
				method,
				path,
				headers: {
					host: new URL(env().ORIGIN).host,
					...(body !== undefined && { 'content-length': String(Buffer.byteLength(body)) }),
					...headers,
				},
			},
			(response) => {
				let text = '';
				response.setEncoding('utf8');
				response.on('data', (chunk: string) => (text += chunk));
				response.on('end', () =>
					resolve({
						status: response.statusCode ?? 0,
						location: response.headers.location,
						cookies: response.headers['set-cookie'] ?? [],
						headers: response.headers,
						body: text,
					}),
				);
				response.on('error', reject);
			},
		);
		sent.on('error', reject);
		sent.end(body);
	});
}
