import * as mentions from '$lib/server/comments/mentions';
import { api } from '$lib/server/web/guard';
import type { RequestEvent } from './$types';

export const GET = api((actor, { params }: RequestEvent) => mentions.people(actor, params.number));
