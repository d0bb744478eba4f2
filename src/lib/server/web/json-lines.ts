import { expected } from './errors';
import { log } from '../log';

interface Work {
	/** Sends a line now. */
	send: (line: object) => void;
	/** Aborted when nobody reads any more. */
	signal: AbortSignal;
}

/** Answers with one JSON text a line, each sent as it comes; what `work` returns is the last one. */
export function jsonLines(work: (how: Work) => Promise<object>): Response {
	const gone = new AbortController();
	const encoder = new TextEncoder();
	const stream = new ReadableStream<Uint8Array>({
		async start(controller) {
			const send = (line: object) => {
				if (!gone.signal.aborted) controller.enqueue(encoder.encode(`${JSON.stringify(line)}\n`));
			};
			try {
				send(await work({ send, signal: gone.signal }));
			} catch (thrown) {
				const failure = expected(thrown);
				if (!failure) log().error({ err: thrown }, 'fault in an answer of several lines');
				send({ message: failure?.message ?? 'Something went wrong on the server.' });
			}
			if (!gone.signal.aborted) controller.close();
		},
		cancel() {
			gone.abort();
		},
	});
	return new Response(stream, { headers: { 'content-type': 'application/x-ndjson' } });
}
