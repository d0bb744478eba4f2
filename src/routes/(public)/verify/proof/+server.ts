import { json } from '@sveltejs/kit';
import { AppError } from '$lib/errors';
import * as publication from '$lib/server/signed-record/publication';
import { expected, toJson } from '$lib/server/web/errors';
import type { RequestEvent } from './$types';

export const GET = async ({ url: { searchParams } }: RequestEvent) => {
	const number = (name: string) => {
		const text = searchParams.get(name);
		return text !== null && /^\d{1,12}$/.test(text) ? Number(text) : undefined;
	};
	const [size, index, from] = [number('size'), number('index'), number('from')];
	try {
		if (size !== undefined && index !== undefined) {
			return json(await publication.inclusion(index, size));
		}
		if (size !== undefined && from !== undefined) {
			return json(await publication.consistency(from, size));
		}
		throw new AppError('invalid', 'Ask with ?index=…&size=… or with ?from=…&size=….');
	} catch (thrown) {
		const failure = expected(thrown);
		if (!failure) throw thrown;
		return toJson(failure);
	}
};
