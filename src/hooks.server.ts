import { building } from '$app/environment';
import { sequence } from '@sveltejs/kit/hooks';
import type { Handle } from '@sveltejs/kit';
import * as auth from '$lib/server/web/auth';
import * as bearer from '$lib/server/web/bearer';
import * as errors from '$lib/server/web/errors';
import { figuresFirst } from '$lib/server/web/figures-first';
import * as guard from '$lib/server/web/guard';
import * as shutdown from '$lib/server/web/shutdown';

export const init = shutdown.listenForEnd;

const pages = sequence(guard.sameOrigin, auth.handle, auth.identify, guard.signedIn, figuresFirst);

// Pages that are made at build time have no visitor, and there is neither a database nor an environment then.
export const handle: Handle = building
	? ({ event, resolve }) => resolve(event)
	: sequence(guard.headers, bearer.scriptsOr(pages));

export const handleError = errors.handleError;
