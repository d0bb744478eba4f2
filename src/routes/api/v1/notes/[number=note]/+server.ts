import * as scripts from '$lib/server/scripts/scripts';
import { api } from '$lib/server/web/guard';
import type { RequestEvent } from './$types';

export const GET = api((actor, { params }: RequestEvent) => scripts.read(actor, params.number));
