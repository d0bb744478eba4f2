import { mailRow } from '$lib/schemas/mail';
import * as unsent from '$lib/server/mail/unsent';
import { action } from '$lib/server/web/form';
import { forMember } from '$lib/server/web/guard';
import type { PageServerLoadEvent, RequestEvent } from './$types';

export const load = forMember((actor, _event: PageServerLoadEvent) => unsent.list(actor));

export const actions = {
	again: action('again', mailRow, async (actor, { id }, _event: RequestEvent) => {
		await unsent.again(actor, id);
		return { action: 'again', done: 'It is sent again now.' };
	}),
	drop: action('drop', mailRow, async (actor, { id }, _event: RequestEvent) => {
		await unsent.drop(actor, id);
		return { action: 'drop', done: 'It stays unsent.' };
	}),
};
