import * as trail from '$lib/server/audit/trail';
import { forMember } from '$lib/server/web/guard';
import type { RequestEvent } from './$types';

export const GET = forMember(async (actor, { url }: RequestEvent) => {
	const asTable = url.searchParams.get('as') !== 'jsonl';
	const body = asTable ? await trail.asTable(actor) : await trail.asLines(actor);
	return new Response(body, {
		headers: {
			'content-type': asTable ? 'text/csv; charset=utf-8' : 'application/x-ndjson',
			'content-disposition': `attachment; filename="audit-trail.${asTable ? 'csv' : 'jsonl'}"`,
		},
	});
});
