import type { Anchor } from '$lib/schemas/comments';
import { fromBase64, toBase64 } from 'lib0/buffer';
import * as Y from 'yjs';

interface Stretch {
	from: number;
	to: number;
}

/** Longest quotation that is kept of a stretch. */
const mostQuoted = 1000;

/** Names a stretch of a cell's source so that it is found again whatever is written before, behind or within it. */
export function anchorOf(text: Y.Text, { from, to }: Stretch, kind: Anchor['kind']): Anchor {
	const position = (index: number, towards: -1 | 0) =>
		toBase64(Y.encodeRelativePosition(Y.createRelativePositionFromTypeIndex(text, index, towards)));
	return {
		kind,
		// What is typed at either edge is no part of the stretch.
		start: position(from, 0),
		end: position(to, -1),
		quote: text.toJSON().slice(from, to).slice(0, mostQuoted),
	};
}

/**
 * Where a stretch is now; undefined where its words are gone. Where the positions say nothing, as in a document that was
 * restored, or there is only a source to look in, it is where its words stand and nowhere else.
 */
export function stretchOf(anchor: Anchor, source: string, text?: Y.Text): Stretch | undefined {
	const held = text && stretchIn(text, anchor);
	if (held) return held.from < held.to ? held : undefined;
	const from = source.indexOf(anchor.quote);
	if (from < 0 || source.includes(anchor.quote, from + 1)) return undefined;
	return { from, to: from + anchor.quote.length };
}

/** Where the positions lie; undefined where they are not of this text. */
function stretchIn(text: Y.Text, { start, end }: Anchor): Stretch | undefined {
	const { doc } = text;
	if (!doc) return undefined;
	const [from, to] = [start, end].map((position) => {
		try {
			const relative = Y.decodeRelativePosition(fromBase64(position));
			const found = Y.createAbsolutePositionFromRelativePosition(relative, doc);
			return found?.type === text ? found.index : undefined;
		} catch {
			// Whatever was sent as a position and is none.
			return undefined;
		}
	});
	return from === undefined || to === undefined ? undefined : { from, to };
}
