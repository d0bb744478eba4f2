import * as review from '$lib/server/revisions/review';
import { api } from '$lib/server/web/guard';
import type { RequestEvent } from './$types';

export const GET = api((actor, { params }: RequestEvent) => review.status(actor, params.number));
