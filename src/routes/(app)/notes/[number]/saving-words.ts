import type { Saving } from '$lib/client/saving.svelte';

const changes = (count: number) => `${count} ${count === 1 ? 'change' : 'changes'}`;

/** What the page says of its unsaved changes. `clock` turns an ISO time into the hour as people read it. */
export function savingWords(
	{ state, count, at, reason }: Saving,
	{ ready, mayWrite }: { ready: boolean; mayWrite: boolean },
	clock: (at: string) => string,
): string {
	if (!ready && state === 'saved') return 'Opening…';
	if (!mayWrite && state === 'saved') return 'To read and comment';
	switch (state) {
		case 'refused':
			return `Refused: ${reason ?? 'the server did not take a change'}`;
		case 'offline':
			return count > 0 ? `Not saved: ${changes(count)} kept on this page` : 'Not connected';
		case 'saving':
			return 'Saving';
		case 'saved':
			return at ? `Saved ${clock(at)}` : 'Saved';
	}
}
