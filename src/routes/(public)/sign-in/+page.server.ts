import { redirect } from '@sveltejs/kit';
import { signIn as schema } from '$lib/schemas/account';
import * as signIn from '$lib/server/auth/sign-in';
import { safePath } from '$lib/server/web/addresses';
import * as auth from '$lib/server/web/auth';
import { submit } from '$lib/server/web/form';
import type { PageServerLoad, RequestEvent } from './$types';

export const load: PageServerLoad = ({ locals, url }) => {
	const to = safePath(url.searchParams.get('to'));
	if (locals.actor) redirect(303, to);
	return { to };
};

export const actions = {
	default: (event: RequestEvent) =>
		submit(event, 'signIn', schema, async ({ to, ...given }) => {
			const token = await signIn.withPassword(given, {
				address: event.getClientAddress(),
				userAgent: event.request.headers.get('user-agent'),
			});
			auth.remember(event.cookies, token);
			redirect(303, safePath(to));
		}),
};
