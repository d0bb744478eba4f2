import { verifying } from '$lib/schemas/review';
import { verified } from '$lib/server/web/verification';
import type { RequestEvent } from './$types';

export const actions = {
	default: (event: RequestEvent) => verified(event, verifying),
};
