import type { ListQuery } from '$lib/schemas/notes';

const usual: ListQuery = { q: '', state: 'all', sort: 'changed', order: 'desc' };

/** Address of the list with a query changed; what is usual is left out, so that equal lists have equal links. */
export function listAddress(query: ListQuery, change: Partial<ListQuery> = {}): string {
	const wanted = { ...query, ...change };
	const kept = Object.entries(wanted).filter(
		([key, value]) => value !== usual[key as keyof ListQuery],
	);
	return kept.length > 0 ? `/notes?${new URLSearchParams(kept).toString()}` : '/notes';
}

/** The change a column head makes: turns its order round, or sorts by it, newest or first letter first. */
export function sortChange(query: ListQuery, sort: ListQuery['sort']): Partial<ListQuery> {
	if (query.sort === sort) return { order: query.order === 'asc' ? 'desc' : 'asc' };
	return { sort, order: sort === 'changed' ? 'desc' : 'asc' };
}
