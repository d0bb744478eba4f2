import { download } from '$lib/server/revisions/sealed-file';
import { forMember } from '$lib/server/web/guard';
import type { RequestEvent } from './$types';

export const GET = forMember(async (actor, { params: { number, letter } }: RequestEvent) => {
	const name = `${number}-${letter}.json`;
	return new Response(await download(actor, number, letter), {
		headers: {
			'content-type': 'application/json',
			'content-disposition': `attachment; filename="${name}"`,
		},
	});
});
