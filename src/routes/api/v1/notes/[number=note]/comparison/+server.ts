import { AppError } from '$lib/errors';
import { comparedSides } from '$lib/schemas/comparison';
import * as comparison from '$lib/server/comparison/comparison';
import { api } from '$lib/server/web/guard';
import type { RequestEvent } from './$types';

export const GET = api(async (actor, { params: { number }, url }: RequestEvent) => {
	const asked = comparedSides.safeParse(Object.fromEntries(url.searchParams));
	if (!asked.success) throw new AppError('invalid', asked.error.issues[0]?.message ?? '');
	const found = await comparison.compare(actor, number, asked.data);
	if (!found) throw new AppError('notFound', 'There is nothing to compare it with yet.');
	return found;
});
