import * as quantities from '$lib/server/quantities/quantities';
import { api } from '$lib/server/web/guard';
import type { RequestEvent } from './$types';

export const GET = api((actor, { params }: RequestEvent) =>
	quantities.get(actor, params.number, params.name),
);
