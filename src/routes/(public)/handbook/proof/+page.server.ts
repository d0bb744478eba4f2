import { engineVersion } from '$lib/calc/engine';
import { proofs } from '$lib/proof/proofs';
import type { PageServerLoad } from './$types';

// Computed once, when the pages are built; the page needs no script.
export const prerender = true;
export const csr = false;

export const load: PageServerLoad = () => ({ engine: engineVersion, groups: proofs() });
