import { redirect } from '@sveltejs/kit';
import { newToken, passwordChange, tokenChoice } from '$lib/schemas/account';
import * as apiTokens from '$lib/server/auth/api-tokens';
import { mailChoice } from '$lib/schemas/mail';
import * as sessions from '$lib/server/auth/sessions';
import * as signIn from '$lib/server/auth/sign-in';
import * as mailPreferences from '$lib/server/mail/preferences';
import * as auth from '$lib/server/web/auth';
import { action } from '$lib/server/web/form';
import { forMember } from '$lib/server/web/guard';
import type { PageServerLoadEvent, RequestEvent } from './$types';

export const load = forMember(async (actor, { cookies }: PageServerLoadEvent) => ({
	sessions: await sessions.list(actor, auth.tokenOf(cookies)),
	tokens: await apiTokens.list(actor),
	mail: await mailPreferences.get(actor),
}));

export const actions = {
	password: action('password', passwordChange, async (actor, change, event: RequestEvent) => {
		const userAgent = event.request.headers.get('user-agent');
		auth.remember(event.cookies, await signIn.changePassword(actor, change, userAgent));
		return { action: 'password', done: 'Your password is changed. Other sessions have ended.' };
	}),
	mail: action('mail', mailChoice, async (actor, choice, _event: RequestEvent) => {
		await mailPreferences.set(actor, choice);
		return { action: 'mail', done: 'Saved.' };
	}),
	createToken: action('createToken', newToken, async (actor, input, event: RequestEvent) => {
		event.setHeaders({ 'cache-control': 'no-store' });
		const { token } = await apiTokens.create(actor, input);
		return { action: 'createToken', made: { name: input.name, token } };
	}),
	revokeToken: action('revokeToken', tokenChoice, async (actor, { id }, _event: RequestEvent) => ({
		action: 'revokeToken',
		done: `“${await apiTokens.revoke(actor, id)}” is revoked.`,
	})),
	signOutEverywhere: forMember(async (actor, event: RequestEvent) => {
		await sessions.endAll(actor);
		auth.forget(event);
		redirect(303, '/sign-in');
	}),
};
