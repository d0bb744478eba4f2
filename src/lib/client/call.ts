/** Asks a route of the pages. What fails throws an Error with a sentence to show. */
export async function call<T>(method: string, address: string, body?: unknown): Promise<T> {
	const response = await send(method, address, body);
	const answer = (await response.json().catch(() => undefined)) as unknown;
	if (response.ok) return answer as T;
	throw new Error(messageOf(answer) ?? `The server refused this (${response.status}).`);
}

/** The same for an answer of several JSON lines; gives each of them as it comes. */
export async function* callForLines<T>(
	address: string,
	body: unknown,
	signal: AbortSignal,
): AsyncGenerator<T> {
	const response = await send('POST', address, body, signal);
	if (!response.ok || !response.body) {
		const answer = (await response.json().catch(() => undefined)) as unknown;
		throw new Error(messageOf(answer) ?? `The server refused this (${response.status}).`);
	}
	const decoder = new TextDecoder();
	const reader = response.body.getReader();
	let text = '';
	for (;;) {
		const { done, value } = await reader.read();
		if (done) return;
		text += decoder.decode(value, { stream: true });
		const lines = text.split('\n');
		text = lines.pop() ?? '';
		for (const line of lines) yield JSON.parse(line) as T;
	}
}

async function send(
	method: string,
	address: string,
	body?: unknown,
	signal?: AbortSignal,
): Promise<Response> {
	try {
		return await fetch(address, {
			method,
			...(signal && { signal }),
			...(body !== undefined && {
				headers: { 'content-type': 'application/json' },
				body: JSON.stringify(body),
			}),
		});
	} catch (error) {
		if (signal?.aborted) throw error;
		throw new Error('The server cannot be reached. Try again when the connection is back.', {
			cause: error,
		});
	}
}

function messageOf(answer: unknown): string | undefined {
	if (typeof answer !== 'object' || answer === null || !('message' in answer)) return undefined;
	return typeof answer.message === 'string' ? answer.message : undefined;
}
