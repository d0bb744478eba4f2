import { decodeJson, messageType, type News } from '$lib/protocol/messages';
import * as decoding from 'lib0/decoding';

/** Pauses between attempts, in milliseconds; each is shortened at random, so that pages do not come back together. */
const pauses = [500, 1000, 2000, 5000, 10_000];

/**
 * Hears on a note's socket when comments or the review change, without its document: a page that asks for nothing is sent
 * none. Returns what ends that.
 */
export function hearNews(
	{ url, noteId }: { url: string; noteId: string },
	handle: (about: News['about']) => void,
): () => void {
	let socket: WebSocket;
	let timer: ReturnType<typeof setTimeout> | undefined;
	let attempt = 0;
	const connect = () => {
		socket = new WebSocket(`${url}/${noteId}`);
		socket.binaryType = 'arraybuffer';
		socket.onmessage = ({ data }: MessageEvent<ArrayBuffer>) => {
			const decoder = decoding.createDecoder(new Uint8Array(data));
			const type = decoding.readVarUint(decoder);
			if (type === messageType.news) handle(decodeJson<News>(decoder).about);
			if (type !== messageType.hello) return;
			// What happened while nothing was heard is read now.
			if (attempt > 0) (['comments', 'review'] as const).forEach(handle);
			attempt = 0;
		};
		socket.onclose = ({ code }) => {
			if (code >= 4400 && code < 4500) return;
			const pause = pauses[Math.min(attempt++, pauses.length - 1)]!;
			timer = setTimeout(connect, pause * (0.5 + Math.random() / 2));
		};
	};
	connect();
	return () => {
		clearTimeout(timer);
		socket.onclose = null;
		socket.close();
	};
}
