import { redirect } from '@sveltejs/kit';
import * as sessions from '$lib/server/auth/sessions';
import * as auth from '$lib/server/web/auth';
import { forMember } from '$lib/server/web/guard';
import type { PageServerLoad, RequestEvent } from './$types';

export const load: PageServerLoad = () => redirect(303, '/notes');

export const actions = {
	default: forMember(async (actor, event: RequestEvent) => {
		await sessions.end(actor, auth.tokenOf(event.cookies));
		auth.forget(event);
		redirect(303, '/sign-in');
	}),
};
