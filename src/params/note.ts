import type { ParamMatcher } from '@sveltejs/kit';

/** A note's number as it is written: MN-014. */
export const match = ((param) => /^[A-Z]{1,6}-\d{3,9}$/.test(param)) satisfies ParamMatcher;
