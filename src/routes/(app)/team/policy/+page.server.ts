import { policyChange } from '$lib/schemas/review';
import * as policies from '$lib/server/revisions/policy';
import { action } from '$lib/server/web/form';
import { forMember } from '$lib/server/web/guard';
import type { PageServerLoadEvent, RequestEvent } from './$types';

export const load = forMember(async (actor, _event: PageServerLoadEvent) => ({
	policy: await policies.get(actor),
}));

export const actions = {
	default: action('policy', policyChange, async (actor, policy, _event: RequestEvent) => {
		await policies.set(actor, policy);
		return { action: 'policy', saved: true };
	}),
};
