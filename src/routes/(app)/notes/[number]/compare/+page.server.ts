import { comparisonQuery } from '$lib/schemas/comparison';
import * as comparison from '$lib/server/comparison/comparison';
import { forMember } from '$lib/server/web/guard';
import type { PageServerLoadEvent } from './$types';

export const load = forMember(async (actor, { params: { number }, url }: PageServerLoadEvent) => {
	const { view, ...asked } = comparisonQuery.parse(Object.fromEntries(url.searchParams));
	return {
		number,
		view,
		sides: await comparison.sides(actor, number),
		comparison: await comparison.compare(actor, number, asked),
	};
});
