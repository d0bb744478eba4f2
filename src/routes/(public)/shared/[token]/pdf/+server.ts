import { printGenuine } from '$lib/server/paper/paper';
import * as sealed from '$lib/server/revisions/sealed-file';
import { paperOf, pdf } from '$lib/server/web/paper';
import { fetchFile } from '$lib/server/web/shared';
import type { RequestEvent } from './$types';

export const GET = (event: RequestEvent) =>
	fetchFile(event, async ({ noteId, number, letter }) => {
		const file = await sealed.read(noteId, letter);
		return pdf(await printGenuine(file, paperOf(event.url)), `${number}-${letter}`);
	});
