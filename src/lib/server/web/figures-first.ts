import type { Handle } from '@sveltejs/kit';

/** Fonts that every page is set in. */
const usual = /\/fira-[a-z-]+-latin-\d+-[a-z]+\.[^/]*woff2$/;

/** The page whose figures stand in its HTML, and whose forty scripts would keep them off a slow computer's screen. */
const sheet = '/(app)/notes/[number]';

/** Has styles and fonts fetched with the HTML, and scripts as well; on a note's sheet those come behind it. */
export const figuresFirst: Handle = ({ event, resolve }) =>
	resolve(event, {
		preload: ({ type, path }) => {
			if (type === 'font') return usual.test(path);
			return type === 'css' || event.route.id !== sheet;
		},
	});
