import type { ClientInit, HandleClientError } from '@sveltejs/kit';

/** Longest wait for a frame; a page that nobody looks at draws none. */
const longestMs = 250;

/** Lets the browser show the page as the server made it before its scripts come alive, which takes a slow one seconds. */
export const init: ClientInit = () => {
	if (document.visibilityState !== 'visible') return;
	return new Promise((resolve) => {
		requestAnimationFrame(() => setTimeout(resolve));
		setTimeout(resolve, longestMs);
	});
};

/** What a page says where it failed by itself, or where the answer to it could not be read. */
export const handleError: HandleClientError = ({ status }) => ({
	message:
		status === 404
			? 'There is no such page.'
			: 'This page could not be shown. Your saved work is safe. Load it again in a moment.',
});
