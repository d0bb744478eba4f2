import type { ServerInit } from '@sveltejs/kit';
import { dev } from '$app/environment';
import { closeDb } from '../db/client';
import { closePool } from '../evaluation/pool';
import { closePress } from '../paper/printing';

/** Lets go of the database, the evaluators and the typesetter when the process ends. */
export const listenForEnd: ServerInit = () => {
	// The development server runs this again at each edit, and ends by being killed.
	if (dev) return;
	process.once('sveltekit:shutdown' as 'exit', () => {
		closePress();
		void Promise.allSettled([closePool(), closeDb()]);
	});
};
