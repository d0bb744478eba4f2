import type { DividerQuestion } from '$lib/calc/tables/divider-question';

/** What a list of dividers has least of at its top. */
export type Order = NonNullable<DividerQuestion['by']>;
