import type { HandleClientError } from '@sveltejs/kit';

/** What a page says where it failed by itself, or where the answer to it could not be read. */
export const handleError: HandleClientError = ({ status }) => ({
	message:
		status === 404
			? 'There is no such page.'
			: 'This page could not be shown. Your saved work is safe. Load it again in a moment.',
});
