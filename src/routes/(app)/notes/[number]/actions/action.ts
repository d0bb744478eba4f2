/** Something that can be done on the sheet. */
export interface Action {
	name: string;
	/** Keys as `Alt+Shift+G`; most actions are done by name. */
	keys?: string;
	run: () => void;
	/** Cannot be done now. */
	off?: boolean;
	/** What it does takes the focus elsewhere; otherwise the focus goes back to where it was. */
	keepsFocus?: boolean;
}

/** The keys that were pressed, as actions name them; undefined where no action has such. */
export function chordOf(event: KeyboardEvent): string | undefined {
	const { key, code, altKey, shiftKey, ctrlKey, metaKey } = event;
	if (!altKey || ctrlKey || metaKey || event.isComposing) return undefined;
	// With Alt some keyboards write a sign of their own; the place of the key tells the letter then.
	const letter = /^[a-z]$/i.test(key) ? key : /^Key[A-Z]$/.test(code) ? code.slice(3) : key;
	const name = letter.length === 1 ? letter.toUpperCase() : letter;
	return shiftKey ? `Alt+Shift+${name}` : `Alt+${name}`;
}

/** Keys as this computer's keyboard has them printed. */
export function printedKeys(keys: string, mac: boolean): string {
	const words: Record<string, string> = mac
		? { Alt: '⌥', Shift: '⇧', Mod: '⌘', Enter: '↩', Delete: '⌦' }
		: { Mod: 'Ctrl' };
	const signs: Record<string, string> = { PageUp: 'Page ↑', PageDown: 'Page ↓' };
	return keys
		.split('+')
		.map((key) => words[key] ?? signs[key] ?? key)
		.join(mac ? ' ' : '+');
}

/** Actions whose name holds every word that was typed, those that begin with the first word before the others. */
export function matching<A extends { name: string }>(actions: readonly A[], typed: string): A[] {
	const words = typed.toLowerCase().split(/\s+/).filter(Boolean);
	const first = words[0] ?? '';
	const found = actions.filter(({ name }) =>
		words.every((word) => name.toLowerCase().includes(word)),
	);
	const begins = (action: A) => (action.name.toLowerCase().startsWith(first) ? 0 : 1);
	return found.sort((a, b) => begins(a) - begins(b));
}
