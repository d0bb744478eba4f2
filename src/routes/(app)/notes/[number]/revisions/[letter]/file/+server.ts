import { download } from '$lib/server/revisions/sealed-file';
import { forMember } from '$lib/server/web/guard';
import { sealedFile } from '$lib/server/web/paper';
import type { RequestEvent } from './$types';

export const GET = forMember(async (actor, { params: { number, letter } }: RequestEvent) =>
	sealedFile(await download(actor, number, letter), `${number}-${letter}`),
);
