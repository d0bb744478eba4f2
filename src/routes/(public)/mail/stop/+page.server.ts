import { fail } from '@sveltejs/kit';
import * as preferences from '$lib/server/mail/preferences';
import type { Actions, PageServerLoad } from './$types';

const tokenOf = (url: URL) => url.searchParams.get('token')?.slice(0, 500) ?? '';

export const load: PageServerLoad = ({ url }) => ({
	kind: preferences.stoppable(tokenOf(url)) ?? null,
});

export const actions: Actions = {
	// Opening the page changes nothing: programs that look at mail open its links. A mailbox's own button posts here too.
	default: async ({ url }) => {
		const kind = await preferences.stop(tokenOf(url));
		return kind ? { stopped: kind } : fail(404, { stopped: null });
	},
};
