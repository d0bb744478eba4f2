import type { Saving } from '$lib/client/saving.svelte';

const opening = 'Opening…';
const changes = (count: number) => `${count} ${count === 1 ? 'change' : 'changes'}`;

/** What the page says of its unsaved changes. `clock` turns an ISO time into the hour as people read it. */
export function savingWords(
	{ state, count, kept, at, reason, failure }: Saving,
	{ ready, mayWrite }: { ready: boolean; mayWrite: boolean },
	clock: (at: string) => string,
): string {
	if (!ready && state !== 'offline' && state !== 'refused') return opening;
	if (!mayWrite && count === 0 && state !== 'offline' && state !== 'refused') {
		return 'To read and comment';
	}
	switch (state) {
		case 'refused':
			return `Refused: ${reason ?? 'the server did not take a change'}`;
		case 'offline':
			if (count === 0) return 'Offline';
			if (kept > 0) return `Offline: ${changes(kept)} kept on this computer`;
			return failure
				? `Offline: ${changes(count)} on this page only. ${failure}`
				: `Offline: ${changes(count)} not saved`;
		case 'saving':
			// What an earlier page left is still being merged.
			return count > 0 ? 'Saving' : opening;
		case 'saved':
			return at ? `Saved ${clock(at)}` : 'Saved';
	}
}

/** The same for people who listen: said when the state changes, not with every key. */
export function savingNews({ state, count, reason, failure }: Saving): string {
	switch (state) {
		case 'refused':
			return `Refused: ${reason ?? ''}`;
		case 'offline':
			if (count === 0) return 'Offline';
			return failure ? `Offline. ${failure}` : 'Offline. Changes are kept on this computer.';
		default:
			return '';
	}
}
