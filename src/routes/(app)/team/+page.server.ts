import { roleChange } from '$lib/schemas/account';
import * as people from '$lib/server/teams/people';
import { action } from '$lib/server/web/form';
import { forMember } from '$lib/server/web/guard';
import type { PageServerLoadEvent, RequestEvent } from './$types';

export const load = forMember(async (actor, _event: PageServerLoadEvent) => ({
	people: await people.list(actor),
}));

export const actions = {
	role: action('role', roleChange, async (actor, { personId, role }, _event: RequestEvent) => {
		await people.setRole(actor, personId, role);
		return { action: 'role', personId };
	}),
};
