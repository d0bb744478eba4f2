import * as sealed from '$lib/server/revisions/sealed-file';
import { sealedFile } from '$lib/server/web/paper';
import { fetchFile } from '$lib/server/web/shared';
import type { RequestEvent } from './$types';

export const GET = (event: RequestEvent) =>
	fetchFile(event, async ({ noteId, number, letter }) =>
		sealedFile(await sealed.read(noteId, letter), `${number}-${letter}`),
	);
