import { json } from '@sveltejs/kit';
import { published } from '$lib/server/signed-record/publication';

export const GET = async () => json(await published());
