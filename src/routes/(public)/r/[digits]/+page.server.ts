import { known } from '$lib/server/web/verification';
import type { PageServerLoadEvent } from './$types';

export const load = async (event: PageServerLoadEvent) => {
	return { outcome: await known(event, event.params.digits) };
};
