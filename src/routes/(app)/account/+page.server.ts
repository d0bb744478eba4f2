import { redirect } from '@sveltejs/kit';
import { passwordChange } from '$lib/schemas/account';
import * as sessions from '$lib/server/auth/sessions';
import * as signIn from '$lib/server/auth/sign-in';
import * as auth from '$lib/server/web/auth';
import { action } from '$lib/server/web/form';
import { forMember } from '$lib/server/web/guard';
import type { PageServerLoadEvent, RequestEvent } from './$types';

export const load = forMember(async (actor, { cookies }: PageServerLoadEvent) => ({
	sessions: await sessions.list(actor, auth.tokenOf(cookies)),
}));

export const actions = {
	password: action('password', passwordChange, async (actor, change, event: RequestEvent) => {
		const userAgent = event.request.headers.get('user-agent');
		auth.remember(event.cookies, await signIn.changePassword(actor, change, userAgent));
		return { action: 'password', done: 'Your password is changed. Other sessions have ended.' };
	}),
	signOutEverywhere: forMember(async (actor, { cookies }: RequestEvent) => {
		await sessions.endAll(actor);
		auth.forget(cookies);
		redirect(303, '/sign-in');
	}),
};
