import { once } from 'node:events';
import { WebSocket } from 'ws';
import * as Y from 'yjs';
import { encodeEdit } from '$lib/protocol/messages';
import { env } from '$lib/server/env';
import type { Fault } from '../fault';
import type { Random } from '../random';
import { addressOf } from '../site';
import type { Disturbance } from '../spy-socket';
import type { Stage } from '../stage';

export const messagesDisturbed: Fault = {
	id: 'messages-disturbed',
	fault: 'messages twice, out of order, cut off and random',
	run: async (stage) => {
		const disturbance: Disturbance = { random: stage.random, twice: 0.2, later: 0.2, done: 0 };
		for (const writer of stage.writers) writer.disturbance = disturbance;
		stage.type(20);
		const wanted = stage.isFull ? 2000 : 60;
		for (let n = 0; n < wanted; n++) await send(stage, nonsense(stage.random));
		await send(stage, waiting());
		await stage.acknowledges(stage.isFull ? 2000 : 100);
		for (const writer of stage.writers) writer.disturbance = undefined;
		if (disturbance.done === 0) stage.complain('no message was disturbed');
		stage.injected += wanted + 1 + disturbance.done;
		await stage.recovers();
	},
};

/** One socket sends what no page would, until it is closed; everybody else goes on. */
async function send({ random, site, notes }: Stage, message: Uint8Array): Promise<void> {
	const { id } = random.pick(notes);
	const socket = new WebSocket(`${addressOf(random.pick(site.posts))}/${id}`, {
		headers: { cookie: random.pick(site.cookies), origin: env().ORIGIN },
	});
	socket.on('error', () => undefined);
	await once(socket, 'open');
	const closed = once(socket, 'close');
	socket.send(message);
	// What happens to make sense is harmless, and then it is we who close.
	socket.close();
	await closed;
}

function nonsense(random: Random): Uint8Array {
	const kind = random.below(3);
	if (kind === 0) return random.bytes(random.below(200));
	const doc = new Y.Doc();
	doc.getText('nowhere').insert(0, 'Some words');
	const whole = encodeEdit(`nonsense-${random.below(1e9)}`, Y.encodeStateAsUpdate(doc));
	if (kind === 1) return whole.slice(0, random.below(whole.length));
	// Garbled behind the first byte, so that it still calls itself an edit.
	return whole.map((byte, at) => (at > 0 && random.chance(0.1) ? random.below(256) : byte));
}

/** An edit that waits for good for the one before it. */
function waiting(): Uint8Array {
	const doc = new Y.Doc();
	const text = doc.getText('nowhere');
	text.insert(0, 'Some');
	const before = Y.encodeStateVector(doc);
	text.insert(4, ' words');
	return encodeEdit('waiting', Y.encodeStateAsUpdate(doc, before));
}
