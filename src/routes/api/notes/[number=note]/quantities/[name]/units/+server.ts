import { typedUnit } from '$lib/schemas/quantities';
import * as quantities from '$lib/server/quantities/quantities';
import { api } from '$lib/server/web/guard';
import type { RequestEvent } from './$types';

export const GET = api((actor, { params, url }: RequestEvent) =>
	quantities.units(
		actor,
		params.number,
		params.name,
		typedUnit.parse(url.searchParams.get('typed')),
	),
);
