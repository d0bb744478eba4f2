import { redirect, type RequestEvent } from '@sveltejs/kit';
import type { unlocking } from '$lib/schemas/sharing';
import { AppError } from '$lib/errors';
import { env } from '../env';
import * as shared from '../sharing/shared';
import { toHttp } from './errors';
import { submit } from './form';

const cookie = 'halfdigit.shared';

type Event = Pick<RequestEvent, 'cookies'> & { params: { token: string } };

/** Shows what a link without an account leads to; undefined where its password was not given. */
export async function visit<T>(
	{ cookies, params }: Event,
	show: (found: shared.Shared) => Promise<T>,
): Promise<T | undefined> {
	try {
		const found = await shared.open(params.token, cookies.get(cookie));
		return found === 'locked' ? undefined : await show(found);
	} catch (thrown) {
		throw toHttp(thrown);
	}
}

/** A file of what the link leads to. Throws where its password was not given. */
export async function fetchFile(
	event: Event,
	make: (found: shared.Shared) => Promise<Response>,
): Promise<Response> {
	const response = await visit(event, make);
	if (!response) {
		throw toHttp(new AppError('forbidden', 'Open the link in your browser and give its password.'));
	}
	return response;
}

/** Takes the password that a link asks for. */
export function unlock(
	event: RequestEvent & { params: { token: string } },
	schema: typeof unlocking,
) {
	const { token } = event.params;
	return submit(event, 'unlock', schema, async ({ password }) => {
		const path = `/shared/${token}`;
		const proof = await shared.unlock(token, password, event.getClientAddress());
		event.cookies.set(cookie, proof, {
			path,
			httpOnly: true,
			sameSite: 'lax',
			secure: env().ORIGIN.startsWith('https:'),
			maxAge: shared.unlockedMs / 1000,
		});
		redirect(303, path);
	});
}
