import * as decoding from 'lib0/decoding';
import * as encoding from 'lib0/encoding';
import type { AddressInfo } from 'node:net';
import { WebSocketServer, type WebSocket } from 'ws';
import { readSyncMessage, writeUpdate } from 'y-protocols/sync';
import * as Y from 'yjs';

/**
 * The peer of the sync rows: relays updates with ws and y-protocols, keeps documents in memory and nothing else; no
 * storage, no rights, no figures. Prints its port.
 */
interface Room {
	doc: Y.Doc;
	sockets: Set<WebSocket>;
}

const rooms = new Map<string, Room>();

function roomOf(name: string): Room {
	const known = rooms.get(name);
	if (known) return known;
	const room: Room = { doc: new Y.Doc(), sockets: new Set() };
	room.doc.on('update', (update: Uint8Array, origin: unknown) => {
		const encoder = encoding.createEncoder();
		encoding.writeVarUint(encoder, 0);
		writeUpdate(encoder, update);
		const message = encoding.toUint8Array(encoder);
		for (const socket of room.sockets) if (socket !== origin) socket.send(message);
	});
	rooms.set(name, room);
	return room;
}

const server = new WebSocketServer({ host: '127.0.0.1', port: 0, perMessageDeflate: false });
server.on('connection', (socket, request) => {
	const room = roomOf(request.url ?? '/');
	room.sockets.add(socket);
	socket.on('close', () => room.sockets.delete(socket));
	socket.on('message', (data) => {
		const decoder = decoding.createDecoder(new Uint8Array(data as Buffer));
		const encoder = encoding.createEncoder();
		encoding.writeVarUint(encoder, decoding.readVarUint(decoder));
		readSyncMessage(decoder, encoder, room.doc, socket);
		if (encoding.length(encoder) > 1) socket.send(encoding.toUint8Array(encoder));
	});
});
server.on('listening', () => {
	process.stdout.write(`${(server.address() as AddressInfo).port}\n`);
});
process.on('disconnect', () => process.exit(0));
