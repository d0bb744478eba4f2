import * as history from '$lib/server/notes/history';
import { api } from '$lib/server/web/guard';
import type { RequestEvent } from './$types';

export const GET = api((actor, { params }: RequestEvent) => history.sessions(actor, params.number));
