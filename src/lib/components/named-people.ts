interface Piece {
	text: string;
	isName: boolean;
}

/** A comment cut at the people it names, `@Cass Kettering`; the pieces joined are the comment. */
export function withNames(body: string, mentions: readonly { name: string }[]): Piece[] {
	// A longer name first: it may begin with a shorter one.
	const names = mentions.map(({ name }) => `@${name}`).sort((a, b) => b.length - a.length);
	return names.reduce<Piece[]>(
		(pieces, name) =>
			pieces.flatMap((piece) =>
				piece.isName
					? [piece]
					: piece.text
							.split(name)
							.flatMap((text, index) => [
								...(index > 0 ? [{ text: name, isName: true }] : []),
								...(text === '' ? [] : [{ text, isName: false }]),
							]),
			),
		[{ text: body, isName: false }],
	);
}

/** The name that is being written in front of the cursor, behind its `@`; undefined where there is none. */
export function nameBegun(
	text: string,
	caret: number,
): { from: number; typed: string } | undefined {
	const match = /(?:^|[\s(])@([^\s@][^@\n]{0,40})?$/u.exec(text.slice(0, caret));
	if (!match) return undefined;
	const typed = match[1] ?? '';
	return { from: caret - typed.length - 1, typed };
}
