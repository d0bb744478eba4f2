import * as checkpoints from '$lib/server/signed-record/checkpoints';

export const GET = async () => {
	const newest = await checkpoints.latest();
	const headers = { 'content-type': 'text/plain; charset=utf-8' };
	return new Response(newest?.note ?? 'Nothing is signed yet.\n', {
		status: newest ? 200 : 404,
		headers,
	});
};
