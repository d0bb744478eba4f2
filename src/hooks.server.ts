import { sequence } from '@sveltejs/kit/hooks';
import * as auth from '$lib/server/web/auth';
import * as bearer from '$lib/server/web/bearer';
import * as errors from '$lib/server/web/errors';
import * as guard from '$lib/server/web/guard';
import * as shutdown from '$lib/server/web/shutdown';

export const init = shutdown.listenForEnd;

const pages = sequence(guard.sameOrigin, auth.handle, auth.identify, guard.signedIn);

export const handle = sequence(guard.headers, bearer.scriptsOr(pages));

export const handleError = errors.handleError;
